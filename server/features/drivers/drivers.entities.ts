import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import type { FitSummary } from "@shared/contract/drivers";
import type { ModelSpec } from "@shared/engine";
import { PersonEntity } from "../accounts";
import { ProductEntity, StoreEntity } from "../catalogue";

export type ModelState = "candidate" | "in-use" | "retired";

/** A store that could not be fitted, and why, in a sentence. */
export type SkippedStore = { store: string; reason: string };

/** A product's model: one specification over some stores and weeks. At most one a product is in use. */
export const ModelEntity = defineEntity({
  name: "Model",
  tableName: "models",
  indexes: [{ properties: ["product", "state"] }],
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    product: () => p.manyToOne(ProductEntity),
    state: p.string().length(12).$type<ModelState>().default("candidate"),
    /** Null where each store has the default specification that its data allow. */
    spec: p.json<ModelSpec>().nullable(),
    firstWeek: p.date().nullable(),
    lastWeek: p.date().nullable(),
    jobId: p.uuid().nullable(),
    createdBy: () => p.manyToOne(PersonEntity),
    createdAt: p.datetime().onCreate(() => new Date()),
    /** When the last of its stores was done; null while it is being fitted. */
    fittedAt: p.datetime().nullable(),
    skipped: p.json<SkippedStore[]>().default([]),
    usedFrom: p.datetime().nullable(),
    usedUntil: p.datetime().nullable(),
    /** Who put it in use; null where a rule of the chain did. */
    usedBy: () => p.manyToOne(PersonEntity).nullable(),
  },
});
export type ModelRow = InferEntity<typeof ModelEntity>;

/** One store's fit, self-contained: a page or plan of one store reads no other row. */
export const ModelFitEntity = defineEntity({
  name: "ModelFit",
  tableName: "model_fits",
  properties: {
    model: () => p.manyToOne(ModelEntity).primary().deleteRule("cascade"),
    store: () => p.manyToOne(StoreEntity).primary(),
    /** As the engine's serialiseModel writes it. */
    fit: p.text().lazy(),
    summary: p.json<FitSummary>(),
    createdAt: p.datetime().onCreate(() => new Date()),
  },
});
export type ModelFit = InferEntity<typeof ModelFitEntity>;
