import type * as contract from "@shared/contract/catalogue-products";
import type { ProductTerms } from "../catalogue.entities";
import { versionOf } from "../changes/versions";
import { termsValues } from "../describe";

export const versionOfTerms = (terms: ProductTerms) => versionOf(termsValues(terms));

export function presentTerms(terms: ProductTerms): contract.ProductTerms {
  const { validFrom, unitCost, regularPrice, taxRate } = terms;
  return { validFrom, unitCost: unitCost ?? null, regularPrice: regularPrice ?? null, taxRate, version: versionOfTerms(terms) };
}

export function presentCategory({ code, name, products }: { code: string; name: string; products: number }): contract.Category {
  return { code, name, products, version: versionOf({ name }) };
}
