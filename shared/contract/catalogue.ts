import { z } from "zod";
import { versionSchema } from "./catalogue-values";
import { codeSchema, daySchema } from "./common";
import { defineEndpoint } from "./endpoint";

export const storeSchema = z.object({
  code: codeSchema,
  name: z.string(),
  region: z.string(),
  opened: daySchema.nullable(),
  closed: daySchema.nullable(),
  version: versionSchema,
});
export type Store = z.infer<typeof storeSchema>;

export const productSchema = z.object({
  code: codeSchema,
  name: z.string(),
  gtin: z.string().nullable(),
  brand: z.string().nullable(),
  category: z.string(),
  categoryName: z.string(),
  soldByWeight: z.boolean(),
  /** Code of the product that this one took the place of; its units times the ratio continue that product's. */
  replaces: z.string().nullable(),
  replacesSizeRatio: z.number().nullable(),
  /** What holds on the day asked for (today unless given); null where the chain has not said. */
  unitCost: z.number().nullable(),
  regularPrice: z.number().nullable(),
  /** Share, for example 0.21. */
  taxRate: z.number(),
  /** Of what describes the product; its terms have versions of their own. */
  version: versionSchema,
});
export type Product = z.infer<typeof productSchema>;

export const listStores = defineEndpoint({
  method: "GET", path: "/api/stores", summary: "All stores", permission: "read", response: z.object({ items: z.array(storeSchema) }),
});
export const listProducts = defineEndpoint({
  method: "GET", path: "/api/products", summary: "All products, with what holds on a day", permission: "read",
  query: z.object({ on: daySchema.optional() }), response: z.object({ items: z.array(productSchema) }),
});
