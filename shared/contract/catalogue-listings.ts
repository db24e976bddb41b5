import { z } from "zod";
import { inOrder, versionSchema } from "./catalogue-values";
import { codeSchema, daySchema, pageOf, pageQuery } from "./common";
import { defineEndpoint } from "./endpoint";

/** Days on which a store has a product. */
export const listingSchema = z.object({
  product: z.string(), store: z.string(), firstDay: daySchema,
  /** Null while it goes on. */
  lastDay: daySchema.nullable(),
  version: versionSchema,
});
export type Listing = z.infer<typeof listingSchema>;

export const newListingsSchema = z.object({
  product: codeSchema,
  stores: z.array(codeSchema).min(1, "Choose at least one store.").max(2_000, "At most 2,000 stores at once."),
  firstDay: daySchema,
  lastDay: daySchema.nullable().default(null),
}).refine(inOrder.check, inOrder.told);

const params = z.object({ product: codeSchema, store: codeSchema, firstDay: daySchema });

export const listListings = defineEndpoint({
  method: "GET", path: "/api/listings", summary: "Which stores have which products, and when", permission: "read",
  query: pageQuery.extend({ product: codeSchema.optional(), store: codeSchema.optional() }), response: pageOf(listingSchema),
});
export const createListings = defineEndpoint({
  method: "POST", path: "/api/listings", summary: "List a product in stores, in all of them or none", permission: "catalogue:write",
  body: newListingsSchema, response: z.object({ entered: z.number().int() }), status: 201,
});
export const putListing = defineEndpoint({
  method: "PUT", path: "/api/listings/:product/:store/:firstDay", summary: "Say until when a store has a product; a new listing is entered",
  permission: "catalogue:write", params, body: z.object({ lastDay: daySchema.nullable() }), response: listingSchema,
});
export const deleteListing = defineEndpoint({
  method: "DELETE", path: "/api/listings/:product/:store/:firstDay", summary: "Remove a listing", permission: "catalogue:write", params,
});
export const exportListings = defineEndpoint({
  method: "GET", path: "/api/listings.csv", summary: "All listings as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
