import { z } from "zod";
import { codeSchema, idParams, idSchema, levelSchema, pageOf, pageQuery, personReferenceSchema, timestampSchema, weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { modelStateSchema, salesWeekSchema } from "./drivers";

export const promotionSchema = z.enum(["none", "feature", "display", "both"]);
export const mechanicSchema = z.enum(["none", "multi_buy", "coupon", "other"]);

/** What the plan changes in one store-week; what is absent stays as in the base. */
export const planCellSchema = z.strictObject({
  store: codeSchema,
  week: weekSchema,
  price: z.number().positive("A price is above zero.").max(1e9).optional(),
  promotion: promotionSchema.optional(),
  mechanic: mechanicSchema.optional(),
  temperatureC: z.number().min(-60).max(60).optional(),
});
export type PlanCell = z.infer<typeof planCellSchema>;

export const scenarioDraftSchema = z.object({
  name: z.string().trim().min(1, "Give the scenario a name.").max(120),
  product: codeSchema,
  stores: z.array(codeSchema).min(1, "Choose at least one store.").max(2000),
  weeks: z.object({ first: weekSchema, last: weekSchema }),
  cells: z.array(planCellSchema).max(60_000),
  /** Cost of the feature or display for the whole plan, net of tax. */
  fixedCost: z.number().min(0).max(1e9).default(0),
  /** Model to predict with: absent, a new scenario takes the product's model in use and a saved one keeps its own. */
  modelId: idSchema.optional(),
});
export type ScenarioDraft = z.infer<typeof scenarioDraftSchema>;

export const scenarioStateSchema = z.enum(["draft", "sent", "approved", "returned", "withdrawn"]);

export const scenarioSchema = scenarioDraftSchema.extend({
  id: idSchema,
  modelId: idSchema,
  /** The model it is predicted with, when it was fitted, and whether it is the product's model in use now. */
  model: z.object({ id: idSchema, fittedAt: timestampSchema, state: modelStateSchema }),
  state: scenarioStateSchema,
  /** Goes up with every save; send it back as If-Match: "version". */
  version: z.number().int(),
  createdBy: personReferenceSchema,
  createdAt: timestampSchema,
  updatedBy: personReferenceSchema,
  updatedAt: timestampSchema,
  may: z.object({ edit: z.boolean() }),
});
export type Scenario = z.infer<typeof scenarioSchema>;

/** A store-week of the base: regular price, no promotion, normal weather, the calendar's events. */
export const baseCellSchema = z.object({
  store: codeSchema, week: weekSchema, regularPrice: z.number().nullable(), normalTemperatureC: z.number().nullable(), event: z.string().nullable(),
  yearFraction: z.number(), weekIndex: z.number(), unitCost: z.number().nullable(), taxRate: z.number(),
});
export type BaseCell = z.infer<typeof baseCellSchema>;

export const listScenarios = defineEndpoint({
  method: "GET", path: "/api/scenarios", summary: "Scenarios, last changed first", permission: "read",
  query: pageQuery.extend({ product: codeSchema.optional() }), response: pageOf(scenarioSchema.omit({ cells: true })),
});
export const createScenario = defineEndpoint({
  method: "POST", path: "/api/scenarios", summary: "Save a new scenario", permission: "scenarios:write",
  body: scenarioDraftSchema, response: scenarioSchema, status: 201,
});
export const getScenario = defineEndpoint({
  method: "GET", path: "/api/scenarios/:id", summary: "One scenario; ETag is its version", permission: "read", params: idParams, response: scenarioSchema,
});
export const putScenario = defineEndpoint({
  method: "PUT", path: "/api/scenarios/:id", summary: "Save a scenario; If-Match must name the version it was read at (412 otherwise)", permission: "scenarios:write",
  params: idParams, body: scenarioDraftSchema, response: scenarioSchema,
});
export const deleteScenario = defineEndpoint({
  method: "DELETE", path: "/api/scenarios/:id", summary: "Delete one's own draft", permission: "scenarios:write", params: idParams,
});

/** All the browser needs to predict by itself, for a scenario that need not be saved yet. */
export const getPlanningContext = defineEndpoint({
  method: "GET", path: "/api/planning-context", summary: "Base cells, fitted models and recent weeks for a product, stores and weeks", permission: "read",
  query: z.object({ product: codeSchema, stores: z.string().min(1).max(60_000), first: weekSchema, last: weekSchema, model: idSchema.optional() }),
  response: z.object({
    modelId: idSchema,
    base: z.array(baseCellSchema),
    fits: z.array(z.object({ store: codeSchema, fit: z.string() })),
    /** Weeks before the plan, per store, newest last. */
    history: z.array(salesWeekSchema.extend({ store: codeSchema })),
    notes: z.array(z.string()),
  }),
});

const interval = z.object({ estimate: z.number(), lower: z.number(), upper: z.number() });

export const predictionSchema = z.object({
  level: z.number(),
  units: interval,
  baseUnits: z.number(),
  /** Base in normal weather; the rest of the base is what this weather adds. */
  baseInNormalWeather: z.number(),
  /** Leads from the base in normal weather to the base: units, and their ratio. */
  weather: z.object({ driver: z.string(), units: z.number(), multiplier: interval }),
  lift: interval,
  /** Units each driver adds to the base; together with `baseUnits` they make `units.estimate`. */
  split: z.array(z.object({ driver: z.string(), units: z.number(), multiplier: interval })),
  weeks: z.array(z.object({ week: weekSchema, units: interval, baseUnits: z.number() })),
  stores: z.array(z.object({ store: codeSchema, units: z.number(), baseUnits: z.number() })),
  netSales: z.object({ plan: z.number(), base: z.number() }).nullable(),
  grossMargin: z.object({ plan: z.number(), base: z.number() }).nullable(),
  netGain: z.number().nullable(),
  breakEven: z.discriminatedUnion("kind", [
    z.object({ kind: z.literal("lift"), lift: z.number() }),
    z.object({ kind: z.literal("none needed") }),
    z.object({ kind: z.literal("cannot break even") }),
    z.object({ kind: z.literal("unknown"), reason: z.string() }),
  ]),
  /** What to distrust, and where; of "plan" or of its "base". */
  flags: z.array(z.object({
    code: z.string(),
    driver: z.string().nullable(),
    of: z.enum(["plan", "base"]),
    stores: z.array(codeSchema),
    weeks: z.array(weekSchema),
    detail: z.string(),
  })),
});
export type Prediction = z.infer<typeof predictionSchema>;

export const predictScenario = defineEndpoint({
  method: "POST", path: "/api/scenarios/:id/predict", summary: "Predict a saved scenario, by the same code the browser runs", permission: "read",
  params: idParams, body: z.object({ level: levelSchema }).default({ level: 0.8 }), response: predictionSchema,
});
