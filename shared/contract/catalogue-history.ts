import { z } from "zod";
import { pageOf, pageQuery, personReferenceSchema, timestampSchema } from "./common";
import { defineEndpoint } from "./endpoint";

/** What a history is kept of. Terms, funding and listings belong to their product's. */
export const historyKindSchema = z.enum(["store", "product", "category", "event", "temperature"]);
export type HistoryKind = z.infer<typeof historyKindSchema>;

const valuesSchema = z.record(z.string(), z.union([z.string(), z.number(), z.boolean(), z.null()]));

/** One change: what was there before, and what was afterwards. */
export const catalogueChangeSchema = z.object({
  id: z.number().int(),
  at: timestampSchema,
  /** Null for the product itself. */
  person: personReferenceSchema.nullable(),
  /** Whether a script did it, by the person's access token. */
  byToken: z.boolean(),
  /** The file that brought it, where one did. */
  file: z.object({ id: z.string(), name: z.string() }).nullable(),
  what: z.enum(["store", "product", "category", "terms", "funding", "listing", "event", "temperature"]),
  change: z.enum(["added", "changed", "removed"]),
  /** Code of the store, product, category or event; the place of a temperature. */
  code: z.string(),
  before: valuesSchema.nullable(),
  after: valuesSchema.nullable(),
});
export type CatalogueChange = z.infer<typeof catalogueChangeSchema>;

export const listCatalogueHistory = defineEndpoint({
  method: "GET", path: "/api/catalogue-history", summary: "Who changed what in the catalogue, newest first", permission: "read",
  query: pageQuery.extend({ kind: historyKindSchema, code: z.string().trim().min(1).max(80).optional() }), response: pageOf(catalogueChangeSchema),
});
