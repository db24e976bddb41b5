import type { EntityManager } from "@mikro-orm/postgresql";
import type { FitSummary } from "@shared/contract/drivers";
import { ModelEntity, type ModelRow, type ModelState, type SkippedStore } from "../drivers.entities";

/** As many of a product's models as a person can look through. */
const mostListed = 50;

/** A model with its product, category and author, without its fits. */
export async function findModel(em: EntityManager, id: string) {
  return em.findOne(ModelEntity, { id }, { populate: ["product.category", "createdBy"] });
}

export type LoadedModel = NonNullable<Awaited<ReturnType<typeof findModel>>>;

/** The model of a product that is in use. */
export async function findModelInUse(em: EntityManager, productId: number): Promise<ModelRow | null> {
  return em.findOne(ModelEntity, { product: productId, state: "in-use" });
}

/** A product's models, newest first. */
export async function findModelsOfProduct(
  em: EntityManager,
  { productId, state }: { productId: number; state?: ModelState },
) {
  return em.find(
    ModelEntity,
    { product: productId, ...(state && { state }) },
    {
      populate: ["product.category", "createdBy"],
      orderBy: { createdAt: "desc", id: "desc" },
      limit: mostListed,
    },
  );
}

/** What can be said of the fits of models, by model, in the order of store codes. */
export async function findFitSummaries(
  em: EntityManager,
  modelIds: readonly string[],
): Promise<Map<string, FitSummary[]>> {
  const summaries = new Map<string, FitSummary[]>(modelIds.map((id) => [id, []]));
  if (modelIds.length === 0) return summaries;
  const rows = await em.execute<{ modelId: string; summary: FitSummary }[]>(
    `select f.model_id as "modelId", f.summary from model_fits f join stores s on s.id = f.store_id
     where f.model_id in (?) order by s.code`,
    [[...modelIds]],
  );
  for (const { modelId, summary } of rows) summaries.get(modelId)?.push(summary);
  return summaries;
}

/** The product's weeks of which rows came with a load after a moment, each with its last such load. */
export async function findWeekLoads(
  em: EntityManager,
  { productId, since }: { productId: number; since: Date },
): Promise<{ week: string; loadedAt: Date }[]> {
  // The weeks those extracts hold bound the scan: it touches their partitions only.
  const rows = await em.execute<{ week: string; loadedAt: Date | string }[]>(
    `with loads as materialized (select id, loaded_at, first_week from extracts where loaded_at > ?)
     select w.week, max(e.loaded_at) as "loadedAt" from weekly_sales w join loads e on e.id = w.extract_id
     where w.product_id = ? and w.week >= (select min(first_week) from loads) group by w.week`,
    [since, productId],
  );
  return rows.map(({ week, loadedAt }) => ({ week, loadedAt: new Date(loadedAt) }));
}

export type StoredFit = { store: string; name: string; region: string; fit: string; summary: FitSummary };

/** The fits of a model as the engine wrote them, by store code; all of them unless stores are named. */
export async function findFits(
  em: EntityManager,
  { modelId, stores }: { modelId: string; stores?: readonly string[] },
): Promise<StoredFit[]> {
  if (stores?.length === 0) return [];
  return em.execute<StoredFit[]>(
    `select s.code as store, s.name, s.region, f.fit, f.summary from model_fits f join stores s on s.id = f.store_id
     where f.model_id = ? ${stores ? "and s.code in (?)" : ""} order by s.code`,
    stores ? [modelId, [...stores]] : [modelId],
  );
}

/** Keys of the stores a model is fitted for already. */
export async function findFittedStoreIds(em: EntityManager, modelId: string): Promise<Set<number>> {
  const rows = await em.execute<{ id: number }[]>("select store_id as id from model_fits where model_id = ?", [
    modelId,
  ]);
  return new Set(rows.map((row) => row.id));
}

/** Writes one store's fit at once; where a run before this one wrote it, that one stays. */
export async function insertFit(
  em: EntityManager,
  fit: { modelId: string; storeId: number; text: string; summary: FitSummary; at: Date },
): Promise<void> {
  await em.execute(
    `insert into model_fits (model_id, store_id, fit, summary, created_at) values (?, ?, ?, ?::jsonb, ?)
     on conflict do nothing`,
    [fit.modelId, fit.storeId, fit.text, JSON.stringify(fit.summary), fit.at],
  );
}

/** Records that all stores of a model are done; false where that was recorded before. */
export async function markFitted(
  em: EntityManager,
  { modelId, skipped, at }: { modelId: string; skipped: readonly SkippedStore[]; at: Date },
): Promise<boolean> {
  const rows = await em.execute<{ id: string }[]>(
    "update models set fitted_at = ?, skipped = ?::jsonb where id = ? and fitted_at is null returning id",
    [at, JSON.stringify(skipped), modelId],
  );
  return rows.length > 0;
}

/** Makes changes of a product's model in use wait for each other until the transaction ends. */
export async function lockProduct(em: EntityManager, productId: number): Promise<void> {
  await em.execute("select id from products where id = ? for update", [productId]);
}

/** Puts a model in use and retires the one before; the product must be locked. */
export async function switchModelInUse(
  em: EntityManager,
  { modelId, productId, personId, at }: { modelId: string; productId: number; personId: string | null; at: Date },
): Promise<void> {
  // In this order: an index allows one in use per product at any moment.
  await em.execute(
    "update models set state = 'retired', used_until = ? where product_id = ? and state = 'in-use' and id <> ?",
    [at, productId, modelId],
  );
  await em.execute(
    "update models set state = 'in-use', used_from = ?, used_until = null, used_by_id = ? where id = ?",
    [at, personId, modelId],
  );
}

/** Removes a model that never was finished; its fits go with it. */
export async function deleteUnfinishedModel(em: EntityManager, modelId: string): Promise<void> {
  await em.nativeDelete(ModelEntity, { id: modelId, fittedAt: null });
}
