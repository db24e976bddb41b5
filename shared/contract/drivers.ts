import { z } from "zod";
import { codeSchema, idParams, idSchema, levelSchema, timestampSchema, weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { acceptedSchema } from "./jobs";

const id = z.string().min(1).max(120).optional();
const column = z.string().min(1).max(60);
const smoothness = z.union([
  z.literal("auto"),
  z.strictObject({ df: z.number().positive() }),
  z.strictObject({ penalty: z.number().positive() }),
]).optional();
const log = z.boolean().optional();
const size = z.number().int().min(4).max(40).optional();

/** One additive term; the engine's `TermSpec` says what each means. */
export const termSpecSchema = z.discriminatedUnion("kind", [
  z.strictObject({ kind: z.literal("linear"), id, column, log }),
  z.strictObject({ kind: z.literal("factor"), id, column, reference: z.string().max(60).optional() }),
  z.strictObject({
    kind: z.literal("smooth"), id, column, log, size, smoothness,
    shape: z.enum(["decreasing", "increasing"]).optional(), by: column.optional(),
  }),
  z.strictObject({ kind: z.literal("cyclic-smooth"), id, column, period: z.tuple([z.number(), z.number()]), size, smoothness }),
  z.strictObject({ kind: z.literal("natural-spline"), id, column, log, df: z.number().int().min(1).max(40) }),
  z.strictObject({
    kind: z.literal("local-regression"), id, column, log, span: z.number().positive().max(1),
    degree: z.union([z.literal(0), z.literal(1), z.literal(2)]).optional(),
  }),
  z.strictObject({
    kind: z.literal("tensor-product"), id, columns: z.tuple([column, column]),
    sizes: z.tuple([z.number().int().min(4).max(12), z.number().int().min(4).max(12)]).optional(), smoothness,
  }),
  z.strictObject({ kind: z.literal("random-walk"), id, column, smoothness }),
  z.strictObject({ kind: z.literal("random-effect"), id, column, by: column.optional(), smoothness }),
  z.strictObject({ kind: z.literal("factor-smooth"), id, column, log, group: column, size, smoothness }),
]);

export const modelSpecSchema = z.strictObject({
  response: column,
  family: z.enum(["gaussian", "log-gaussian", "quasi-poisson", "negative-binomial", "binomial"]),
  offset: column.optional(),
  weights: column.optional(),
  terms: z.array(termSpecSchema).max(20),
});

export const modelStateSchema = z.enum(["candidate", "in-use", "retired"]);

/** What can be said of a fit without its coefficients. */
export const fitSummarySchema = z.object({
  store: codeSchema,
  rows: z.number().int(),
  firstWeek: weekSchema,
  lastWeek: weekSchema,
  devianceExplained: z.number().nullable(),
  dispersion: z.number(),
  edf: z.number(),
  converged: z.boolean(),
  warnings: z.array(z.string()),
  /** Sold-out weeks left out, and partly sold-out weeks that count in part. */
  stockOuts: z.object({ leftOut: z.number().int(), partly: z.number().int() }),
  /** Drivers that could not be learnt here, each with the reason. */
  leftOut: z.array(z.object({ driver: z.string(), reason: z.string() })),
  /** Drivers that the default specification kept to a straight line, each with the reason. */
  straightLines: z.array(z.object({ driver: z.string(), reason: z.string() })),
  /** How much there was to learn a price effect from; not `enough`: show elasticities greyed. */
  priceLearning: z.object({ weeksMoved: z.number().int(), regularPrices: z.number().int(), enough: z.boolean() }),
  meanWeeklyUnits: z.number(),
  /** Mean of what the fitted weeks would have sold at regular price without promotion; null where it cannot be said. */
  meanBaseUnits: z.number().nullable(),
});
export type FitSummary = z.infer<typeof fitSummarySchema>;

export const modelSchema = z.object({
  id: idSchema,
  product: codeSchema,
  state: modelStateSchema,
  /** Null where each store has the default specification that its data allow. */
  spec: modelSpecSchema.nullable(),
  createdAt: timestampSchema,
  createdBy: z.string(),
  jobId: idSchema.nullable(),
  usedFrom: timestampSchema.nullable(),
  usedUntil: timestampSchema.nullable(),
  fits: z.array(fitSummarySchema),
  /** Weeks of the product that were loaded, or loaded anew with other figures, since this model was asked for. */
  newerWeeks: z.number().int(),
  /** Stores that could not be fitted, each with the reason. */
  skipped: z.array(z.object({ store: codeSchema, reason: z.string() })),
  /** Why plans cannot use it, in a sentence; null where they can. */
  notForPlans: z.string().nullable(),
  /** What the reader may do with it. */
  may: z.object({ use: z.boolean() }),
});
export type Model = z.infer<typeof modelSchema>;

const weeks = z.object({ first: weekSchema, last: weekSchema });

/** Answer where several stores are fitted in the background: 202, with Location of the job. */
export const modelAcceptedSchema = acceptedSchema.extend({ id: idSchema });

export const createModel = defineEndpoint({
  method: "POST", path: "/api/models",
  summary: "Fit a product's model: for one store at once (201), for several in the background (202, Location of the job)",
  permission: "models:fit",
  body: z.object({
    product: codeSchema,
    /** Store codes; all stores that sold the product when absent. */
    stores: z.array(codeSchema).min(1).max(10_000).optional(),
    weeks: weeks.optional(),
    /** The default specification when absent. */
    spec: modelSpecSchema.optional(),
  }),
  response: z.object({
    id: idSchema,
    coefficients: z.array(z.object({ name: z.string(), value: z.number(), standardError: z.number() })),
    edf: z.number(),
    terms: z.array(z.object({ id: z.string(), edf: z.number() })),
    fitted: z.array(z.object({ store: codeSchema, week: weekSchema, value: z.number() })),
    warnings: z.array(z.string()),
  }),
  status: 201, orAccepted: true,
});

export const listModels = defineEndpoint({
  method: "GET", path: "/api/models", summary: "A product's models, newest first", permission: "read",
  query: z.object({ product: codeSchema, state: modelStateSchema.optional() }), response: z.object({ items: z.array(modelSchema) }),
});
export const getModel = defineEndpoint({
  method: "GET", path: "/api/models/:id", summary: "One model and its fits", permission: "read", params: idParams, response: modelSchema,
});
export const getModelFits = defineEndpoint({
  method: "GET", path: "/api/models/:id/fits", summary: "The fitted models themselves, one text per store as the engine serialises it",
  permission: "read", params: idParams, query: z.object({ stores: z.string().max(20_000).optional() }),
  response: z.object({ items: z.array(z.object({ store: codeSchema, fit: z.string() })) }),
});
export const useModel = defineEndpoint({
  method: "PUT", path: "/api/models/:id/use", summary: "Put a model in use in place of the one before", permission: "models:use",
  params: idParams, response: modelSchema,
});

/** What bands allow for: "averaged" the coefficients and how smooth curves are, "pointwise" the coefficients alone. */
export const bandSchema = z.enum(["averaged", "pointwise"]);
export type ShownBand = z.infer<typeof bandSchema>;

/** A driver's curve on the link scale, centred; exp() of it is the multiplier. */
export const curveSchema = z.object({
  term: z.string(),
  /** What it stands for on screens: price, season, temperature, promotion, mechanic, event, trend … */
  driver: z.string(),
  kind: z.enum([
    "linear", "factor", "smooth", "cyclic-smooth", "natural-spline", "local-regression", "random-walk", "random-effect",
  ]),
  column: z.string(),
  /** Numbers, or the levels of a factor. */
  x: z.union([z.array(z.number()), z.array(z.string())]),
  estimate: z.array(z.number()),
  standardError: z.array(z.number()),
  lower: z.array(z.number()),
  upper: z.array(z.number()),
  observedRange: z.tuple([z.number(), z.number()]).nullable(),
  /** Weeks seen near each x. */
  supportCount: z.array(z.number()),
  /** Every value seen, one entry a week, for the rug; empty for levels. */
  seen: z.array(z.number()),
  /** d ln(units) / d ln(price) at each x with its interval, for the price driver; null for others. */
  elasticity: z.object({ estimate: z.array(z.number()), lower: z.array(z.number()), upper: z.array(z.number()) }).nullable(),
});
export type Curve = z.infer<typeof curveSchema>;

export const getModelCurves = defineEndpoint({
  method: "GET", path: "/api/models/:id/curves", summary: "Every driver's curve of one store with its band", permission: "read",
  params: idParams, query: z.object({ store: codeSchema, level: levelSchema, points: z.coerce.number().int().min(10).max(500).default(101) }),
  response: z.object({
    store: codeSchema, level: z.number(), band: bandSchema, intercept: z.number(), curves: z.array(curveSchema),
  }),
});

/** One store-week as the model reads it. */
export const salesWeekSchema = z.object({
  week: weekSchema, units: z.number(), netSales: z.number(), price: z.number().nullable(), priceSource: z.string(),
  regularPrice: z.number().nullable(), promotion: z.enum(["none", "feature", "display", "both"]), mechanic: z.string(),
  temperatureC: z.number().nullable(), event: z.string().nullable(), openDays: z.number().nullable(), stockOutDays: z.number().nullable(),
});
export type SalesWeek = z.infer<typeof salesWeekSchema>;

export const getSalesWeeks = defineEndpoint({
  method: "GET", path: "/api/sales", summary: "A product's weeks in one store", permission: "read",
  query: z.object({ product: codeSchema, store: codeSchema, first: weekSchema.optional(), last: weekSchema.optional() }),
  response: z.object({ items: z.array(salesWeekSchema) }),
});
