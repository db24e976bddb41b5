import { describe, it } from "vitest";
import { expectCriterionAgreement, expectNestedAgreement, expectTestAgreement, testedCases } from "./support/agreement-tests";
import { committedReference } from "./support/reference-files";

const reference = committedReference("tests-of-terms");

describe("Tests of terms and information criteria agree with the reference package's", () => {
  it.each(testedCases)("Wald-type tests of curves, and of a factor's levels: $name", (one) => expectTestAgreement(reference, one));
  it.each(testedCases)("conditional AIC: $name", (one) => expectCriterionAgreement(reference, one));
  it("the comparison of a curve with a line, as anova has it", () => expectNestedAgreement(reference));
});
