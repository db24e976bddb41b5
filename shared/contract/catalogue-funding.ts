import { z } from "zod";
import { amountSchema, inOrder, versionSchema } from "./catalogue-values";
import { codeSchema, daySchema } from "./common";
import { defineEndpoint } from "./endpoint";

/** A supplier's contribution over some days, net of tax. */
export const fundingSchema = z.object({
  product: z.string(), firstDay: daySchema, lastDay: daySchema,
  /** For each unit sold. */
  perUnit: z.number(),
  /** However many are sold. */
  lumpSum: z.number(),
  version: versionSchema,
});
export type Funding = z.infer<typeof fundingSchema>;

const given = z.object({ lastDay: daySchema, perUnit: amountSchema.default(0), lumpSum: amountSchema.default(0) });
const isSome = ({ perUnit, lumpSum }: { perUnit: number; lumpSum: number }) => perUnit > 0 || lumpSum > 0;
const told = { path: ["perUnit"], message: "Give an amount per unit, a lump sum or both." };

export const newFundingSchema = given.extend({ product: codeSchema, firstDay: daySchema }).refine(isSome, told).refine(inOrder.check, inOrder.told);
export const changedFundingSchema = given.refine(isSome, told);

const params = z.object({ product: codeSchema, firstDay: daySchema });

export const listFunding = defineEndpoint({
  method: "GET", path: "/api/funding", summary: "Suppliers' contributions, by product and first day", permission: "read",
  query: z.object({ product: codeSchema.optional() }), response: z.object({ items: z.array(fundingSchema) }),
});
export const createFunding = defineEndpoint({
  method: "POST", path: "/api/funding", summary: "Enter a supplier's contribution", permission: "catalogue:write",
  body: newFundingSchema, response: fundingSchema, status: 201,
});
export const putFunding = defineEndpoint({
  method: "PUT", path: "/api/funding/:product/:firstDay", summary: "Change a supplier's contribution", permission: "catalogue:write",
  params, body: changedFundingSchema, response: fundingSchema,
});
export const deleteFunding = defineEndpoint({
  method: "DELETE", path: "/api/funding/:product/:firstDay", summary: "Remove a supplier's contribution", permission: "catalogue:write", params,
});
export const exportFunding = defineEndpoint({
  method: "GET", path: "/api/funding.csv", summary: "All funding as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
