import { z } from "zod";
import { defineJob, type JobDefinition } from "../../jobs/job-queue";
import { fitStores, type ModelToFit } from "./models/fit-stores";
import { deleteUnfinishedModel, findModel, type LoadedModel } from "./models/models.repository";

/**
 * Fits the stores of a model one after the other. Begun again after a killed worker, it goes on with the stores that are
 * not done; given up or cancelled, it leaves no half model.
 */
export const fitModelsJob = defineJob({
  kind: "fit-models",
  payload: z.object({
    modelId: z.uuid(),
    stores: z.array(z.object({ id: z.number().int(), code: z.string() })).min(1),
  }),
  async run({ payload, em, progress, now }) {
    const model = await findModel(em, payload.modelId);
    if (!model) return { modelId: payload.modelId, fitted: 0, skipped: [] };
    const outcome = await fitStores({
      em,
      model: toFit(model),
      stores: payload.stores,
      at: now,
      onStore: ({ done, total, store }) => progress({ done, total, message: `Store ${store}` }),
    });
    return { modelId: model.id, ...outcome };
  },
  async onGivenUp({ payload, services }) {
    await deleteUnfinishedModel(services.orm.em.fork(), payload.modelId);
  },
});

function toFit(model: LoadedModel): ModelToFit {
  const { firstWeek, lastWeek } = model;
  return {
    id: model.id,
    productId: model.product.id,
    productCode: model.product.code,
    spec: model.spec ?? null,
    ...(firstWeek && lastWeek && { weeks: { first: firstWeek, last: lastWeek } }),
  };
}

export const driversJobs: readonly JobDefinition[] = [fitModelsJob];
