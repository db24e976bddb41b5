import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { getChain } from "../../chain";
import { requireProduct, requireStores, type StoredSalesRow } from "../../drivers";
import { requirePlanningModel, throwFaults } from "../draft/check-draft";
import { weekFaults } from "../draft/draft-faults";
import { historyBefore, planBase, type PlanBase } from "./planning-context.service";

export type ContextRequest = { product: string; stores: readonly string[]; first: Day; last: Day; model?: string };

/**
 * All that a browser needs to predict plans of a product, stores and weeks by itself, for a scenario that need not be saved.
 *
 * @throws ProblemError 422 for unknown codes, weeks that are none of the chain's, or a product without a model in use.
 */
export async function readPlanningContext(
  em: EntityManager,
  request: ContextRequest,
): Promise<{ context: PlanBase; history: StoredSalesRow[] }> {
  const weeks = { first: request.first, last: request.last };
  const { weekStart } = await getChain(em);
  throwFaults(weekFaults({ weeks, weekStart, path: { first: "first", last: "last" } }));
  const product = await requireProduct(em, request.product);
  const stores = await requireStores(em, request.stores);
  const model = await requirePlanningModel(em, { product, modelId: request.model });
  const frame = { productId: product.id, stores, weeks, model };
  return { context: await planBase(em, frame), history: await historyBefore(em, frame) };
}
