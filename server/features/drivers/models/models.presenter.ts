import type { createModel, Model } from "@shared/contract/drivers";
import type { ResponseOf } from "@shared/contract/endpoint";
import { modelReport, type FittedModel } from "@shared/engine";
import type { Caller } from "../../../http/route";
import { mayUseModels } from "../drivers.policy";
import type { StoreFit } from "./fit-store";
import { notForPlans } from "./not-for-plans";
import type { ModelWithFits } from "./read-models.service";

const timestamp = (at: Date | null | undefined) => at?.toISOString() ?? null;

/** A model with its fits, and what the reader may do with it. */
export function presentModel({ model, fits, newerWeeks }: ModelWithFits, caller: Caller): Model {
  const reason = model.spec ? notForPlans(model.spec) : null;
  const isUsable = model.fittedAt !== null && model.state !== "in-use" && reason === null;
  return {
    id: model.id,
    product: model.product.code,
    state: model.state,
    spec: model.spec ?? null,
    createdAt: model.createdAt.toISOString(),
    createdBy: model.createdBy.name,
    jobId: model.jobId ?? null,
    usedFrom: timestamp(model.usedFrom),
    usedUntil: timestamp(model.usedUntil),
    fits,
    newerWeeks,
    skipped: model.skipped,
    notForPlans: reason,
    may: { use: isUsable && mayUseModels(caller, model.product.category.code) },
  };
}

/** A store's new fit, for the answer of the request that made it. */
export function presentFit({ modelId, fit }: { modelId: string; fit: StoreFit }): ResponseOf<typeof createModel> {
  const { model, rows, summary } = fit;
  return {
    id: modelId,
    coefficients: model.coefficientNames.map((name, index) => ({
      name,
      value: model.coefficients[index],
      standardError: standardError(model, index),
    })),
    edf: model.edf,
    terms: modelReport(model).terms.map(({ id, edf }) => ({ id, edf })),
    fitted: rows.map(({ store, week }, index) => ({ store, week, value: model.fitted[index] })),
    warnings: summary.warnings,
  };
}

function standardError({ covariance }: FittedModel, index: number): number {
  // The diagonal of a packed lower triangle.
  return Math.sqrt(covariance[(index * (index + 1)) / 2 + index]);
}
