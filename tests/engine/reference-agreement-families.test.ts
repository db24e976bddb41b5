import { describe, it } from "vitest";
import { expectCountAgreement, expectShareAgreement } from "./support/agreement-families";
import { committedReference } from "./support/reference-files";

// Tolerances: fitted 1e-3, degrees of freedom 0.02, standard errors 1 %, theta 1e-3; see counts-and-shares.R.
const { negativeBinomial, binomial } = committedReference("counts-and-shares");

describe("Families of known scale agree with the reference package's", () => {
  it.each(negativeBinomial)("negative binomial: $name", (one) => expectCountAgreement(one));
  it.each(binomial)("binomial: $name", (one) => expectShareAgreement(one));
});
