import { z } from "zod";
import { codeSchema, daySchema, idParams, weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { acceptedSchema } from "./jobs";

/** A code of the file that the catalogue lacks, with the rows that wait for it. */
const unknownCodeSchema = z.object({ code: z.string(), rows: z.number().int(), firstWeek: weekSchema.nullable(), lastWeek: weekSchema.nullable() });

/** Stores and products named in an extract that the catalogue lacks, by rows; the first 500 of each, and how many there are. */
export const unknownCodesSchema = z.object({
  stores: z.array(unknownCodeSchema), storesTotal: z.number().int(),
  products: z.array(unknownCodeSchema), productsTotal: z.number().int(),
});
export type UnknownCodes = z.infer<typeof unknownCodesSchema>;

export const getUnknownCodes = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/unknown-codes", summary: "Stores and products of the file that the catalogue lacks", permission: "read",
  params: idParams, response: unknownCodesSchema,
});
export const createUnknownCodes = defineEndpoint({
  method: "POST", path: "/api/extracts/:id/unknown-codes", summary: "Enter stores and products that the file names, and check it again",
  permission: "catalogue:write", params: idParams,
  body: z.object({
    stores: z.array(z.object({ code: codeSchema, name: z.string().trim().min(1).max(120), region: z.string().trim().min(1).max(80), opened: daySchema.nullable().default(null) })).max(500).default([]),
    products: z.array(z.object({ code: codeSchema, name: z.string().trim().min(1).max(160), category: codeSchema, brand: z.string().trim().max(120).nullable().default(null) })).max(500).default([]),
  }),
  response: acceptedSchema, status: 202,
});
