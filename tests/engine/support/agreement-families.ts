import { fitModel } from "@shared/engine";
import type { ModelSpec } from "@shared/engine";
import { expect } from "vitest";
import { expectGamAgreement, iterativeTolerances } from "./gam-agreement";
import { largestRelativeDifference, largestDifference } from "./measures";
import type { CountCase, ShareCase } from "./reference-shapes";

const terms: ModelSpec["terms"] = [
  { kind: "smooth", column: "price", log: true, size: 8 },
  { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1], size: 12 },
  { kind: "factor", column: "promotion", reference: "none" },
];
const smooths = { price: [0], yearFraction: [1] };

/** Negative binomial: predictor, errors, edf, fitted counts and theta as bam(family = nb()) has them. */
export function expectCountAgreement({ data, fit }: CountCase): void {
  const model = fitModel({ response: "units", family: "negative-binomial", terms }, data);
  expectGamAgreement({ model, data, summary: fit, terms: smooths, within: iterativeTolerances });
  expect(largestRelativeDifference(model.fitted, fit.fitted)).toBeLessThan(iterativeTolerances.fitted);
  expect(Math.abs((model.theta ?? Number.NaN) / fit.theta - 1)).toBeLessThan(1e-3);
}

/** Binomial: predictor, errors, edf and fitted shares as bam(family = binomial()) has them. */
export function expectShareAgreement({ data, fit }: ShareCase): void {
  const model = fitModel({ response: "share", family: "binomial", weights: "trials", terms }, data);
  expectGamAgreement({ model, data, summary: fit, terms: smooths, within: iterativeTolerances });
  expect(largestDifference(model.fitted, fit.fitted)).toBeLessThan(iterativeTolerances.fitted);
  expect(model.theta).toBe(null);
}
