import { z } from "zod";
import { productSchema } from "./catalogue";
import { amountSchema, taxRateSchema, textSchema, versionSchema } from "./catalogue-values";
import { codeSchema, daySchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { isGtin } from "./gtin";

const described = z.object({
  name: textSchema(160),
  gtin: z.string().trim().refine(isGtin, "This is no GTIN: it has 8, 12, 13 or 14 digits, the last of which is a check digit.").nullable().default(null),
  brand: textSchema(120).nullable().default(null),
  /** Code of a category; a new one is entered with it. */
  category: codeSchema,
  soldByWeight: z.boolean().default(false),
  replaces: codeSchema.nullable().default(null),
  /** So many units of the product replaced make one of this, for example 0.75 where the pack grew. */
  replacesSizeRatio: z.number("Give a number.").positive("The ratio is above 0.").max(10_000, "The ratio is at most 10,000.").nullable().default(null),
});
type Replacing = { replaces: string | null; replacesSizeRatio: number | null };
const goTogether = ({ replaces, replacesSizeRatio }: Replacing) => (replaces === null) === (replacesSizeRatio === null);
const told = { path: ["replacesSizeRatio"], message: "Give both the product replaced and the size ratio, or neither." };

/** What holds from a day on, until the next such day. */
export const termsSchema = z.object({
  /** 1970-01-01: from the beginning. */
  validFrom: daySchema,
  unitCost: z.number().nullable(),
  regularPrice: z.number().nullable(),
  taxRate: z.number(),
  version: versionSchema,
});
export type ProductTerms = z.infer<typeof termsSchema>;

export const changedTermsSchema = z.object({
  /** Net of tax. */
  unitCost: amountSchema.nullable().default(null),
  /** Tax included. */
  regularPrice: amountSchema.positive("A price is above 0; leave it empty where it is not known.").nullable().default(null),
  taxRate: taxRateSchema.default(0),
});
export const newProductSchema = described.extend({ code: codeSchema, terms: changedTermsSchema.optional() }).refine(goTogether, told);
export const changedProductSchema = described.refine(goTogether, told);

export const categorySchema = z.object({ code: z.string(), name: z.string(), products: z.number().int(), version: versionSchema });
export type Category = z.infer<typeof categorySchema>;

const params = z.object({ code: codeSchema });
const termsParams = params.extend({ validFrom: daySchema });

export const createProduct = defineEndpoint({
  method: "POST", path: "/api/products", summary: "Enter a product, with terms from the beginning", permission: "catalogue:write",
  body: newProductSchema, response: productSchema, status: 201,
});
export const putProduct = defineEndpoint({
  method: "PUT", path: "/api/products/:code", summary: "Change what describes a product", permission: "catalogue:write",
  params, body: changedProductSchema, response: productSchema,
});
export const deleteProduct = defineEndpoint({
  method: "DELETE", path: "/api/products/:code", summary: "Remove a product that nothing refers to", permission: "catalogue:write", params,
});
export const exportProducts = defineEndpoint({
  method: "GET", path: "/api/products.csv", summary: "All products and their terms as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
export const listTerms = defineEndpoint({
  method: "GET", path: "/api/products/:code/terms", summary: "A product's cost, regular price and tax by date, oldest first", permission: "read",
  params, response: z.object({ items: z.array(termsSchema) }),
});
export const putTerms = defineEndpoint({
  method: "PUT", path: "/api/products/:code/terms/:validFrom", summary: "Say what holds for a product from a day on", permission: "catalogue:write",
  params: termsParams, body: changedTermsSchema, response: termsSchema,
});
export const deleteTerms = defineEndpoint({
  method: "DELETE", path: "/api/products/:code/terms/:validFrom", summary: "Remove terms; those before them go on", permission: "catalogue:write", params: termsParams,
});
export const listCategories = defineEndpoint({
  method: "GET", path: "/api/categories", summary: "All categories", permission: "read", response: z.object({ items: z.array(categorySchema) }),
});
export const putCategory = defineEndpoint({
  method: "PUT", path: "/api/categories/:code", summary: "Name a category; a new one is entered", permission: "catalogue:write",
  params, body: z.object({ name: textSchema(120) }), response: categorySchema,
});
