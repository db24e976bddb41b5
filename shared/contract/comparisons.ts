import { z } from "zod";
import { codeSchema, idSchema, levelSchema } from "./common";
import { bandSchema, curveSchema } from "./drivers";
import { defineEndpoint } from "./endpoint";

const interval = z.object({ estimate: z.number(), lower: z.number(), upper: z.number() });

export const comparisonSchema = z.object({
  product: codeSchema,
  modelId: idSchema,
  driver: z.string(),
  level: z.number(),
  /** Of all stores' curves and elasticities. */
  band: bandSchema,
  /** Price that each store's curve is drawn relative to; null for drivers without an anchor. */
  anchor: z.number().nullable(),
  stores: z.array(z.object({
    store: codeSchema,
    name: z.string(),
    region: z.string(),
    meanWeeklyUnits: z.number(),
    /** The driver's curve, or null with the reason where this store could not learn it. */
    curve: curveSchema.nullable(),
    reason: z.string().nullable(),
    /** Slope d ln(units) / d ln(price) at the anchor, for the price driver. */
    elasticity: interval.nullable(),
  })),
  /** All stores that learnt the driver together: the mean of their multipliers weighted by base units; null where none did. */
  chain: z.object({
    x: z.union([z.array(z.number()), z.array(z.string())]),
    /** On the link scale, like the stores' curves. */
    estimate: z.array(z.number()),
    elasticity: interval.nullable(),
    meanWeeklyUnits: z.number(),
  }).nullable(),
});
export type Comparison = z.infer<typeof comparisonSchema>;

export const getComparison = defineEndpoint({
  method: "GET", path: "/api/comparisons", summary: "One driver's curve of a product for all its stores", permission: "read",
  query: z.object({
    product: codeSchema,
    driver: z.string().min(1).max(120).default("price"),
    level: levelSchema,
    /** Price that curves are drawn relative to; the chain's regular price today when absent. */
    anchor: z.coerce.number().positive().optional(),
    points: z.coerce.number().int().min(10).max(200).default(61),
    /** The product's model in use when absent. */
    model: idSchema.optional(),
  }),
  response: comparisonSchema,
});
