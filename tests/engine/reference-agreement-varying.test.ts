import { describe, it } from "vitest";
import { expectLevelAgreement, expectNumberAgreement, expectSurfaceAgreement } from "./support/agreement-varying";
import { committedReference } from "./support/reference-files";

// Tolerances: fitted 1e-5 of the standard deviation, degrees of freedom 1e-3, standard errors 1e-3; see varying-curves.R.
const reference = committedReference("varying-curves");

describe("Curves that vary with another column agree with the reference package's", () => {
  it("one curve per level of a factor, beyond the range too", () => expectLevelAgreement(reference));
  it("a curve times a number", () => expectNumberAgreement(reference));
  it.each(reference.surfaces)("an interaction of sizes $sizes beside its main effects", (surface) => expectSurfaceAgreement(surface));
});
