import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import type { PlanCell } from "@shared/contract/scenarios";
import { PersonEntity } from "../accounts";
import { ProductEntity } from "../catalogue";
import { ModelEntity } from "../drivers";

export type ScenarioState = "draft" | "sent" | "approved" | "returned" | "withdrawn";

export const ScenarioEntity = defineEntity({
  name: "Scenario",
  tableName: "scenarios",
  indexes: [{ properties: ["updatedAt"] }, { properties: ["product", "state"] }],
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    name: p.string().length(120),
    product: () => p.manyToOne(ProductEntity),
    model: () => p.manyToOne(ModelEntity),
    /** Codes, in the order chosen. */
    stores: p.array().$type<string[]>(),
    firstWeek: p.date(),
    lastWeek: p.date(),
    cells: p.json<PlanCell[]>().lazy(),
    fixedCost: p.decimal("number").precision(14).scale(4).default(0),
    state: p.string().length(12).$type<ScenarioState>().default("draft"),
    /** Compared with If-Match, and by the database at every save. */
    version: p.integer().version(),
    createdBy: () => p.manyToOne(PersonEntity),
    createdAt: p.datetime().onCreate(() => new Date()),
    updatedBy: () => p.manyToOne(PersonEntity),
    updatedAt: p.datetime().onCreate(() => new Date()),
  },
});
export type ScenarioRow = InferEntity<typeof ScenarioEntity>;
