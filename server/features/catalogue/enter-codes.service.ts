import type { EntityManager } from "@mikro-orm/postgresql";
import { isGtin } from "@shared/contract/gtin";
import type { Day } from "@shared/calendar";
import type { Author } from "./changes/author";
import { lockCatalogue } from "./changes/catalogue-lock.repository";
import { stageNewProducts, stageNewStores } from "./enter-codes.repository";
import { mergeProducts } from "./merge/merge-products.repository";
import { mergeStores } from "./merge/merge-stores.repository";

export type NewStore = { code: string; name: string; region: string; opened: Day | null };
export type NewProduct = { code: string; name: string; category: string; brand: string | null };

/**
 * Enters stores whose codes are not there yet, in the context's transaction, with an entry in the history each; a code
 * that is there already is left alone.
 *
 * @returns how many were entered.
 */
export async function enterStores(em: EntityManager, { stores, by }: { stores: readonly NewStore[]; by: Author }): Promise<number> {
  if (stores.length === 0) return 0;
  await lockCatalogue(em);
  const { table, rows } = await stageNewStores(em, stores);
  await mergeStores(em, table, by);
  return rows;
}

/** As `enterStores`, for products: their terms hold from the beginning, and say nothing yet. A code that is a GTIN is the product's GTIN too. */
export async function enterProducts(em: EntityManager, { products, by }: { products: readonly NewProduct[]; by: Author }): Promise<number> {
  if (products.length === 0) return 0;
  await lockCatalogue(em);
  const named = products.map((product) => ({ ...product, gtin: product.code.length >= 12 && isGtin(product.code) ? product.code : null }));
  const { table, rows } = await stageNewProducts(em, named);
  await mergeProducts(em, table, by);
  return rows;
}
