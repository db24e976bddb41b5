import type { Funding } from "@shared/contract/catalogue-funding";
import type { ProductFunding } from "../catalogue.entities";
import { versionOf } from "../changes/versions";
import { fundingValues } from "../describe";

export const versionOfFunding = (funding: ProductFunding) => versionOf(fundingValues(funding));

/** A contribution with its product. */
export function presentFunding(funding: ProductFunding): Funding {
  const { product, firstDay, lastDay, perUnit, lumpSum } = funding;
  return { product: product.code, firstDay, lastDay, perUnit, lumpSum, version: versionOfFunding(funding) };
}
