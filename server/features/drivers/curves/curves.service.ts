import type { EntityManager } from "@mikro-orm/postgresql";
import { bandOf, readFit, type ShownBand } from "@shared/planning";
import { ProblemError } from "../../../errors";
import { requireStores } from "../catalogue-lookup";
import { findFits } from "../models/models.repository";
import { requireModel } from "../models/read-models.service";
import { modelCurves, type DriverCurve } from "./model-curves";

export type StoreCurves = { store: string; level: number; band: ShownBand; intercept: number; curves: DriverCurve[] };

/**
 * Every driver's curve of a model in one store.
 *
 * @throws ProblemError 404 for an unknown model, or one that has no fit for the store; 422 for an unknown store.
 */
export async function curvesOfStore(
  em: EntityManager,
  { modelId, store, level, points }: { modelId: string; store: string; level: number; points: number },
): Promise<StoreCurves> {
  const model = await requireModel(em, modelId);
  await requireStores(em, [store]);
  const [stored] = await findFits(em, { modelId, stores: [store] });
  if (!stored) throw noFit({ store, reason: model.skipped.find((skipped) => skipped.store === store)?.reason });
  const fit = readFit(stored.fit);
  return { store, level, band: bandOf([fit]), intercept: fit.coefficients[0], curves: modelCurves(fit, { level, points }) };
}

function noFit({ store, reason }: { store: string; reason?: string }): ProblemError {
  const why = reason ? ` ${reason}` : " Fit the product for this store first.";
  return new ProblemError({
    status: 404,
    code: "no-fit",
    detail: `This model knows nothing of store "${store}".${why}`,
  });
}
