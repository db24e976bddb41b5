import type { Model } from "@shared/contract/drivers";
import type { Scenario } from "@shared/contract/scenarios";

/** The model in use as one that a plan could take: how many of the plan's stores it knows. */
export type ModelOffer = { id: string; fittedAt: string; learnt: number; stores: number };

/** What to offer a plan that another model than its own is in use for; null where its own is, or none. */
export const modelOffer = (
  { stores }: Pick<Scenario, "stores">,
  { modelId, inUse }: { modelId: string; inUse: Model | null | undefined },
): ModelOffer | null => {
  if (!inUse || inUse.id === modelId) return null;
  const known = new Set(inUse.fits.map(({ store }) => store));
  const learnt = stores.filter((store) => known.has(store)).length;
  return { id: inUse.id, fittedAt: inUse.createdAt, learnt, stores: stores.length };
};
