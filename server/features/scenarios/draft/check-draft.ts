import type { EntityManager } from "@mikro-orm/postgresql";
import type { ScenarioDraft } from "@shared/contract/scenarios";
import { unusable, type ProblemError } from "../../../errors";
import { getChain } from "../../chain";
import {
  notForPlans,
  requireModelOfProduct,
  requireProduct,
  requireStores,
  type LoadedModel,
  type ProductReference,
  type StoreReference,
} from "../../drivers";
import { cellFaults, weekFaults, type DraftFault } from "./draft-faults";

/** Faults named at once. */
const mostNamed = 50;

/** A draft whose codes were found and whose weeks and cells are right. */
export type CheckedDraft = {
  draft: ScenarioDraft;
  product: ProductReference;
  stores: StoreReference[];
  model: LoadedModel;
};

/**
 * Checks a draft against the catalogue, the chain's calendar and the product's models.
 *
 * @param keep model and product of a scenario saved before: it keeps its model where the draft names none and the product
 * stayed the same.
 * @throws ProblemError 422 that names every fault (the first 50); its code is the first one's.
 */
export async function checkDraft(
  em: EntityManager,
  draft: ScenarioDraft,
  keep?: { modelId: string; product: string },
): Promise<CheckedDraft> {
  const { weekStart } = await getChain(em);
  throwFaults(weekFaults({ weeks: draft.weeks, weekStart }));
  throwFaults(cellFaults(draft));
  const product = await requireProduct(em, draft.product);
  const stores = await requireStores(em, draft.stores);
  const kept = keep?.product === product.code ? keep.modelId : undefined;
  const model = await requirePlanningModel(em, { product, modelId: draft.modelId ?? kept });
  return { draft, product, stores, model };
}

/**
 * The model that plans of a product are predicted with: the one named, else the product's model in use.
 *
 * @throws ProblemError 422 where none is in use, or the one named cannot serve plans or is another product's; 404 where
 * there is no such model.
 */
export async function requirePlanningModel(
  em: EntityManager,
  { product, modelId }: { product: ProductReference; modelId?: string },
): Promise<LoadedModel> {
  const model = await requireModelOfProduct(em, { product, modelId });
  if (!model.fittedAt)
    throw unusable("still-fitting", "This model is still being fitted. Wait until its job has ended.");
  const reason = model.spec ? notForPlans(model.spec) : null;
  if (reason !== null) throw unusable("not-for-plans", `${reason} Choose another model of the product.`);
  return model;
}

/** @throws ProblemError 422 where there are faults. */
export function throwFaults(faults: readonly DraftFault[]): void {
  if (faults.length > 0) throw faultsProblem(faults);
}

function faultsProblem(faults: readonly DraftFault[]): ProblemError {
  const [first] = faults;
  const others = faults.length > 1 ? ` (and ${faults.length - 1} more)` : "";
  return unusable(
    first.code,
    `${first.message}${others}`,
    faults.slice(0, mostNamed).map(({ path, message }) => ({ path, message })),
  );
}
