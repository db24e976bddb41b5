import { fitModel, predict, termCurve } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { expect } from "vitest";
import { largestDifference, largestRelativeDifference, standardDeviation } from "./measures";
import type { FitSummary, References, SeriesReference } from "./reference-files";

const terms: ModelSpec["terms"] = [
  { kind: "smooth", column: "price", log: true, size: 8 },
  { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5], size: 12 },
  { kind: "factor", column: "deal" },
  { kind: "linear", column: "feat" },
];

/** Tolerances: fitted in standard deviations, edf absolute, standard errors relative. */
type Tolerances = { fitted: number; edf: number; standardError: number };

/** Gaussian against gam(method = "REML"): as the engine's definition demands. */
export const gaussianTolerances: Tolerances = { fitted: 1e-5, edf: 1e-3, standardError: 1e-3 };
/** Others against bam(method = "fREML"): that one stops its penalty search at each working model, so it is looser. */
export const quasiPoissonTolerances: Tolerances = { fitted: 1e-3, edf: 0.02, standardError: 1e-2 };

export function expectGaussianAgreement(series: SeriesReference): void {
  const model = fitModel({ response: "logmove", family: "gaussian", terms }, series.data);
  expectAgreement(model, series, { summary: series.gaussian, scale: standardDeviation(series.data.logmove), within: gaussianTolerances });
}

export function expectQuasiPoissonAgreement(series: SeriesReference): void {
  const model = fitModel({ response: "units", family: "quasi-poisson", terms }, series.data);
  const { quasiPoisson: summary } = series;
  expectAgreement(model, series, { summary, scale: standardDeviation(summary.linearPredictor), within: quasiPoissonTolerances });
}

function expectAgreement(
  model: FittedModel, series: SeriesReference, against: { summary: FitSummary; scale: number; within: Tolerances },
): void {
  const { summary, scale, within } = against;
  const prediction = predict(model, series.data);
  expect(model.converged).toBe(true);
  expect(largestDifference(prediction.linearPredictor, summary.linearPredictor) / scale).toBeLessThan(within.fitted);
  expect(largestRelativeDifference(prediction.standardError, summary.standardError)).toBeLessThan(within.standardError);
  expect(largestDifference(model.terms.slice(0, 2).map(({ edf }) => edf), summary.edf)).toBeLessThan(within.edf);
  expect(Math.abs(model.edf - summary.totalEdf)).toBeLessThan(within.edf);
  expect(Math.abs(model.dispersion / summary.dispersion - 1)).toBeLessThan(within.standardError);
  expect(Math.abs(model.deviance / summary.deviance - 1)).toBeLessThan(within.fitted);
  expect(Math.abs(model.nullDeviance / summary.nullDeviance - 1)).toBeLessThan(1e-8);
  const curve = termCurve(model, "price", { at: series.data.price });
  expect(largestDifference(curve.estimate, summary.priceCurve) / scale).toBeLessThan(within.fitted);
  // A curve that is all but a line has errors near zero where it crosses; so against the largest one.
  const widest = Math.max(...summary.priceError);
  expect(largestDifference(curve.standardError, summary.priceError) / widest).toBeLessThan(within.standardError);
  const { coefficients, coefficientNames } = model;
  expect(Math.abs(coefficients[coefficientNames.indexOf("deal[1]")] - summary.deal) / scale).toBeLessThan(within.fitted);
  expect(Math.abs(coefficients[coefficientNames.indexOf("feat")] - summary.feature) / scale).toBeLessThan(within.fitted);
}

/** Coefficients and standard errors by name, against R's in the same order. */
export function expectCoefficients(model: FittedModel, names: string[], reference: { estimate: number[]; error: number[] }): void {
  const positions = names.map((name) => model.coefficientNames.indexOf(name));
  expect(positions).not.toContain(-1);
  const errors = positions.map((at) => Math.sqrt(model.covariance[(at * (at + 1)) / 2 + at]));
  expect(largestRelativeDifference(positions.map((at) => model.coefficients[at]), reference.estimate)).toBeLessThan(1e-8);
  expect(largestRelativeDifference(errors, reference.error)).toBeLessThan(1e-8);
}

/** The level where straight lines' columns are zero rather than at their means, as regression tables give it. */
export function levelAtZero(model: FittedModel): number {
  return model.terms.reduce((level, { basis, first }) => level - (basis.kind === "linear" ? basis.centre * model.coefficients[first] : 0), model.coefficients[0]);
}

export function expectIceCreamAgreement({ iceCream }: References["linear-models"]): void {
  const columns = ["income_dollars_per_week", "price_dollars_per_pint", "temperature_f"];
  const model = fitModel(
    { response: "consumption_pints_per_head", family: "gaussian", terms: columns.map((column) => ({ kind: "linear", column })) },
    iceCream.data,
  );
  expectCoefficients(model, columns, { estimate: iceCream.fit.estimate.slice(1), error: iceCream.fit.error.slice(1) });
  expect(levelAtZero(model)).toBeCloseTo(iceCream.fit.estimate[0], 9);
  expect(1 - model.deviance / model.nullDeviance).toBeCloseTo(iceCream.rSquared, 9);
  // As published, to the digits published.
  expect(levelAtZero(model)).toBeCloseTo(0.1973, 4);
  expect(model.coefficients[1]).toBeCloseTo(0.003308, 6);
  expect(model.coefficients[2]).toBeCloseTo(-1.0444, 4);
  expect(model.coefficients[3]).toBeCloseTo(0.003458, 6);
  expect(iceCream.rSquared).toBeCloseTo(0.719, 3);
}
