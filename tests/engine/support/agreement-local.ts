import { fitModel, predict } from "@shared/engine";
import type { ModelSpec, TermSpec } from "@shared/engine";
import { expect } from "vitest";
import { largestDifference, largestRelativeDifference } from "./measures";
import type { LocalModels, NaturalAndLocal } from "./reference-shapes";

/** Closed formulas on both sides: what is left is arithmetic. */
const exact = 1e-8;
/** Share of a term's range: backfitting on interpolated local fits, and splines with a knot at every value. */
const alike = 0.02;

/** lm(y ~ ns(x, df)): at the rows, and along straight lines beyond them. */
export function expectNaturalAgreement({ data, at }: NaturalAndLocal["natural"], fit: NaturalAndLocal["natural"]["fits"][number]): void {
  const terms: TermSpec[] = [{ kind: "natural-spline", column: "x", df: fit.df }];
  if (fit.withFactor) terms.push({ kind: "factor", column: "promotion", reference: "none" });
  const model = fitModel({ response: "y", family: "gaussian", terms }, data);
  expect(model.dispersion / fit.dispersion).toBeCloseTo(1, 8);
  expect(model.edf).toBeCloseTo(1 + fit.df + (fit.withFactor ? 1 : 0), 10);
  const there = { x: at, promotion: at.map(() => "feature") };
  for (const [rows, reference] of [[data, fit], [there, fit.there]] as const) {
    const prediction = predict(model, rows);
    expect(largestDifference(prediction.linearPredictor, reference.linearPredictor)).toBeLessThan(exact);
    expect(largestRelativeDifference(prediction.standardError, reference.standardError)).toBeLessThan(exact);
  }
}

/** loess(surface = "direct"): residual scale, fitted values and their errors, at the rows and between them. */
export function expectLocalAgreement({ data, between }: NaturalAndLocal["local"], fit: NaturalAndLocal["local"]["fits"][number]): void {
  const { span, degree } = fit;
  const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "x", span, degree }] }, data);
  expect(Math.sqrt(model.deviance / fit.residualDegreesOfFreedom) / fit.residualScale).toBeCloseTo(1, 8);
  expect(Math.sqrt(model.dispersion) / fit.residualScale).toBeCloseTo(1, 8);
  expect(model.edf).toBeCloseTo(fit.trace, 7);
  expect(largestDifference(model.fitted, fit.fitted)).toBeLessThan(exact);
  for (const [x, reference] of [[data.x, fit], [between, fit.there]] as const) {
    const prediction = predict(model, { x });
    expect(largestDifference(prediction.mean, reference.fitted)).toBeLessThan(exact);
    expect(largestRelativeDifference(prediction.standardError, reference.standardError)).toBeLessThan(exact);
  }
}

/** Package gam's s(x, df): penalised splines with many knots stand close to one with a knot at every value. */
export function expectSplineTerms({ data }: LocalModels["splines"], df: Record<string, number>, terms: number[][]): void {
  const columns = Object.keys(df);
  const spec: ModelSpec = {
    response: "y", family: "gaussian",
    terms: columns.map((column) => ({ kind: "smooth", column, size: 20, smoothness: { df: df[column] } })),
  };
  expectTermsAlike(spec, data, Object.fromEntries(columns.map((column, index) => [column, terms[index]])));
}

const localSpecs: Record<string, { terms: TermSpec[]; ids: string[] }> = {
  "one local line": { terms: [{ kind: "local-regression", column: "x", span: 0.5 }], ids: ["x"] },
  "a local line beside a factor and a straight line": {
    terms: [
      { kind: "local-regression", column: "x", span: 0.4 }, { kind: "factor", column: "promotion", reference: "none" },
      { kind: "linear", column: "line" },
    ],
    ids: ["x", "promotion", "line"],
  },
};

/** Package gam's lo(), alone and beside parametric terms. */
export function expectLocalTerms({ data }: LocalModels["local"], { name, terms }: LocalModels["local"]["cases"][number]): void {
  const { terms: specs, ids } = localSpecs[name];
  expectTermsAlike({ response: "y", family: "gaussian", terms: specs }, data, Object.fromEntries(ids.map((id, index) => [id, terms[index]])));
}

const twoLines: ModelSpec = {
  response: "y", family: "gaussian",
  terms: [{ kind: "local-regression", column: "x", span: 0.5 }, { kind: "local-regression", column: "z", span: 0.6 }],
};

/** Two local lines of orthogonal columns: package gam's within 2 % of each term's range. */
export function expectOrthogonalLines({ splines, local }: LocalModels): void {
  expectTermsAlike(twoLines, splines.data, { x: local.orthogonal[0], z: local.orthogonal[1] });
}

/** Two local lines of any columns: what exact backfitting of loess comes to, to 1e-8. */
export function expectBackfittedLines({ local }: LocalModels): void {
  const { contributions } = predict(fitModel(twoLines, local.data), local.data);
  expect(largestDifference(contributions.x, local.backfitted[0])).toBeLessThan(exact);
  expect(largestDifference(contributions.z, local.backfitted[1])).toBeLessThan(exact);
}

/** Terms centred over the rows, against the reference's, in shares of each term's range. */
function expectTermsAlike(spec: ModelSpec, data: Parameters<typeof predict>[1], terms: Record<string, number[]>): void {
  const { contributions } = predict(fitModel(spec, data), data);
  for (const [id, reference] of Object.entries(terms)) {
    const own = Array.from(contributions[id]);
    const mean = own.reduce((sum, value) => sum + value, 0) / own.length;
    const range = Math.max(...reference) - Math.min(...reference);
    expect(largestDifference(own.map((value) => value - mean), reference) / range, id).toBeLessThan(alike);
  }
}
