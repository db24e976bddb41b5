import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { requireProduct, requireStores } from "../catalogue-lookup";
import { readSalesRows, type StoredSalesRow } from "./sales.repository";

/**
 * A product's weeks in one store, oldest first.
 *
 * @throws ProblemError 422 where the product or store is unknown.
 */
export async function salesOfStore(
  em: EntityManager,
  { product, store, first, last }: { product: string; store: string; first?: Day; last?: Day },
): Promise<StoredSalesRow[]> {
  const { id: productId } = await requireProduct(em, product);
  const [{ id: storeId }] = await requireStores(em, [store]);
  return readSalesRows(em, { productId, storeIds: [storeId], first, last });
}
