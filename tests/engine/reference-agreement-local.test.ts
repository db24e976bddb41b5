import { describe, it } from "vitest";
import { expectBackfittedLines, expectLocalAgreement, expectLocalTerms, expectOrthogonalLines } from "./support/agreement-local";
import { committedReference } from "./support/reference-files";

const { local } = committedReference("natural-and-local");
const models = committedReference("local-models");

describe("A local regression agrees with stats::loess to 1e-8", () => {
  it.each(local.fits)("of degree $degree over a span of $span", (fit) => expectLocalAgreement(local, fit));
});

describe("Models with local terms agree with R's package gam within 2 % of each term's range", () => {
  it.each(models.local.cases)("with $name", (one) => expectLocalTerms(models.local, one));
  it("with two local lines of orthogonal columns", () => expectOrthogonalLines(models));
});

describe("Models with two local terms agree with backfitting", () => {
  it("until it rests, to 1e-8", () => expectBackfittedLines(models));
});
