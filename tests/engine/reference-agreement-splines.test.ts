import { describe, it } from "vitest";
import { expectNaturalAgreement, expectSplineTerms } from "./support/agreement-local";
import { committedReference } from "./support/reference-files";

const { natural } = committedReference("natural-and-local");
const { splines } = committedReference("local-models");

describe("Regression splines agree with lm on splines::ns to 1e-8", () => {
  it.each(natural.fits)("with df $df, beside a factor: $withFactor", (fit) => expectNaturalAgreement(natural, fit));
});

describe("Smoothing splines of R's package gam are met within 2 % of their range", () => {
  it.each(splines.oneTerm)("by a curve with as many degrees of freedom: $df", ({ df, terms }) => expectSplineTerms(splines, { x: df }, terms));

  it("by two curves of orthogonal columns", () => {
    const { df, terms } = splines.twoTerms;
    expectSplineTerms(splines, { x: df[0], z: df[1] }, terms);
  });
});
