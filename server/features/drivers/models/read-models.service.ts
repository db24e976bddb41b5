import type { EntityManager } from "@mikro-orm/postgresql";
import type { FitSummary } from "@shared/contract/drivers";
import { notFound, unusable } from "../../../errors";
import { requireProduct, type ProductReference } from "../catalogue-lookup";
import type { ModelState } from "../drivers.entities";
import {
  findFitSummaries,
  findFits,
  findModel,
  findModelInUse,
  findModelsOfProduct,
  findWeekLoads,
  type LoadedModel,
  type StoredFit,
} from "./models.repository";

/** A model, what can be said of its fits, and how many weeks were loaded since. */
export type ModelWithFits = { model: LoadedModel; fits: FitSummary[]; newerWeeks: number };

/** @throws ProblemError 404 where there is no such model. */
export async function requireModel(em: EntityManager, id: string): Promise<LoadedModel> {
  const model = await findModel(em, id);
  if (!model) throw notFound("model");
  return model;
}

/**
 * The model to work with: the one named, else the product's model in use.
 *
 * @throws ProblemError 404 for an unknown model, 422 where it is another product's, or none is in use.
 */
export async function requireModelOfProduct(
  em: EntityManager,
  { product, modelId }: { product: ProductReference; modelId?: string },
): Promise<LoadedModel> {
  const id = modelId ?? (await findModelInUse(em, product.id))?.id;
  if (id === undefined) {
    throw unusable(
      "no-model-in-use",
      `Product "${product.code}" has no model in use. Fit it on the Drivers page, or by POST /api/models, first.`,
    );
  }
  const model = await requireModel(em, id);
  if (model.product.id === product.id) return model;
  throw unusable(
    "model-of-other-product",
    `This model is of product "${model.product.code}", not of "${product.code}".`,
  );
}

/** @throws ProblemError 404 where there is no such model. */
export async function readModel(em: EntityManager, id: string): Promise<ModelWithFits> {
  const model = await requireModel(em, id);
  const summaries = await findFitSummaries(em, [id]);
  const loads = await findWeekLoads(em, { productId: model.product.id, since: model.createdAt });
  return { model, fits: summaries.get(id) ?? [], newerWeeks: loads.length };
}

/**
 * A product's newest models.
 *
 * @throws ProblemError 422 where there is no such product.
 */
export async function listModelsOfProduct(
  em: EntityManager,
  { product, state }: { product: string; state?: ModelState },
): Promise<ModelWithFits[]> {
  const { id: productId } = await requireProduct(em, product);
  const models = await findModelsOfProduct(em, { productId, state });
  const summaries = await findFitSummaries(
    em,
    models.map((model) => model.id),
  );
  const oldest = models.at(-1);
  const loads = oldest ? await findWeekLoads(em, { productId, since: oldest.createdAt }) : [];
  return models.map((model) => ({
    model,
    fits: summaries.get(model.id) ?? [],
    newerWeeks: loads.filter(({ loadedAt }) => loadedAt > model.createdAt).length,
  }));
}

/**
 * The fits of a model as text; all of them unless stores are named. Stores without a fit are simply not there.
 *
 * @throws ProblemError 404 where there is no such model.
 */
export async function readFits(
  em: EntityManager,
  { modelId, stores }: { modelId: string; stores?: readonly string[] },
): Promise<StoredFit[]> {
  await requireModel(em, modelId);
  return findFits(em, { modelId, stores });
}
