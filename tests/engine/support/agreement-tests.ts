import { compareModels, fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelReport, ModelSpec, Smoothness, TermSpec } from "@shared/engine";
import { expect } from "vitest";
import { expectGamAgreement, gaussianTolerances } from "./gam-agreement";
import type { TestsOfTerms } from "./reference-shapes";

type Case = { name: "gaussian" | "negativeBinomial" | "binomial"; response: string; family: ModelSpec["family"] };

export const testedCases: Case[] = [
  { name: "gaussian", response: "logUnits", family: "gaussian" },
  { name: "negativeBinomial", response: "units", family: "negative-binomial" },
  { name: "binomial", response: "bought", family: "binomial" },
];
const smooths = { price: [0], yearFraction: [1], temperature: [2] };

function fitCase(reference: TestsOfTerms, { response, family }: Case, smoothness: readonly Smoothness[]): FittedModel {
  const terms: ModelSpec["terms"] = [
    { kind: "smooth", column: "price", log: true, size: 8, smoothness: smoothness[0] },
    { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1], size: 12, smoothness: smoothness[1] },
    { kind: "smooth", column: "temperature", size: 8, smoothness: smoothness[2] },
    { kind: "factor", column: "promotion", reference: "none" },
  ];
  return fitModel({ response, family, terms }, reference.data);
}

const byLikelihood: Smoothness[] = ["auto", "auto", "auto"];

/**
 * Tests of curves and of the factor: the statistic to 1e-5, the p-value to a thousandth of itself. Below 1e-10 the
 * reference's is 0 or wrong, for it integrates to an absolute accuracy.
 */
export function expectTestAgreement(reference: TestsOfTerms, one: Case): void {
  const given = reference.given.map((penalty) => ({ penalty }));
  const model = fitCase(reference, one, one.family === "gaussian" ? byLikelihood : given);
  const { fit, smooth, factor } = reference[one.name];
  expectGamAgreement({ model, data: reference.data, summary: fit, terms: smooths, within: gaussianTolerances });
  const { terms } = modelReport(model);
  smooth.statistic.forEach((statistic, k) => {
    expectTest(terms[k], { statistic, referenceDegreesOfFreedom: smooth.referenceDegreesOfFreedom[k], pValue: smooth.pValue[k] });
  });
  const { degreesOfFreedom, ...ofFactor } = factor;
  expectTest(terms[3], { ...ofFactor, referenceDegreesOfFreedom: degreesOfFreedom });
}

type TestOfTerm = { statistic: number; referenceDegreesOfFreedom: number; pValue: number };

function expectTest({ id, test }: ModelReport["terms"][number], expected: TestOfTerm): void {
  if (!test) throw new Error(`There is no test of ${id}.`);
  expect(Math.abs(test.statistic / expected.statistic - 1), id).toBeLessThan(1e-5);
  expect(Math.abs(test.referenceDegreesOfFreedom - expected.referenceDegreesOfFreedom), id).toBeLessThan(1e-5);
  if (expected.pValue < 1e-10) expect(test.pValue, id).toBeLessThan(1e-10);
  else expect(Math.abs(test.pValue / expected.pValue - 1), id).toBeLessThan(1e-3);
}

/** Conditional AIC: for a normal response the criteria are the same; for others see `aicTolerance`. */
export function expectCriterionAgreement(reference: TestsOfTerms, one: Case): void {
  const { criteria } = reference[one.name];
  const model = fitCase(reference, one, byLikelihood);
  const { aic, aicReason } = modelReport(model);
  expect(aicReason).toBe(null);
  expect(Math.abs((aic ?? Number.NaN) - criteria.aic)).toBeLessThan(aicTolerance[one.name]);
  expect(Math.abs((model.logLikelihood ?? Number.NaN) - criteria.logLikelihood)).toBeLessThan(aicTolerance[one.name]);
}

/**
 * gam(method = "REML") takes Laplace's approximation where ours and bam take the working model's likelihood, so other
 * families' penalties (and theta) are not quite the same: by less than half a unit of AIC, which decides nothing.
 */
const aicTolerance: Record<Case["name"], number> = { gaussian: 1e-4, negativeBinomial: 0.5, binomial: 0.5 };

/** anova's F of a straight line within a natural spline, and the difference of their AIC: both closed formulas. */
export function expectNestedAgreement({ data, nested }: TestsOfTerms): void {
  const fit = (term: TermSpec) =>
    fitModel({ response: "logUnits", family: "gaussian", terms: [term, { kind: "factor", column: "promotion", reference: "none" }] }, data);
  const line = fit({ kind: "linear", column: "temperature" });
  const comparison = compareModels(line, fit({ kind: "natural-spline", column: "temperature", df: nested.df }));
  expect(comparison.distribution).toBe("F");
  expect((comparison.statistic ?? Number.NaN) / nested.statistic).toBeCloseTo(1, 8);
  expect(comparison.degreesOfFreedom).toBeCloseTo(nested.degreesOfFreedom, 8);
  expect(comparison.residualDegreesOfFreedom).toBeCloseTo(nested.residualDegreesOfFreedom, 8);
  expect((comparison.pValue ?? Number.NaN) / nested.pValue).toBeCloseTo(1, 8);
  expect(comparison.aicDifference).toBeCloseTo(nested.aicDifference, 7);
}
