import type { ModelWarning } from "./model";
import type { TermSpec } from "./spec";

export type PredictOptions = {
  /** Probability the interval holds, between 0 and 1 (default 0.95). */
  level?: number;
  /** "mean": of the expected value (default). "observation": of a new row's value. */
  interval?: "mean" | "observation";
};

/** One entry per row of the data. */
export type Prediction = {
  /** Expected value; for log-gaussian exp(eta + dispersion / 2). */
  mean: Float64Array;
  /** Value that half of new rows fall below: for log-gaussian exp(eta), for gaussian the mean, null for quasi-poisson. */
  median: Float64Array | null;
  lower: Float64Array;
  upper: Float64Array;
  linearPredictor: Float64Array;
  /** Of the linear predictor, coefficients' uncertainty only. */
  standardError: Float64Array;
  /** Per term id, and "intercept" and "offset": parts of the linear predictor, which they sum to. */
  contributions: Record<string, Float64Array>;
  /** Per term id: 1 where the row's value lies outside the range the term was fitted to. */
  outside: Record<string, Uint8Array>;
};

/**
 * What a curve's band allows for. pointwise: the coefficients' error, penalties taken as known; zero where a line crosses its
 * mean. with-mean: also the error of the level the curve stands on, for centred curves. corrected: with-mean, and the error
 * of chosen penalties by Taylor expansion. averaged: the curve's own error, averaged over all penalties that the rows
 * leave possible. Slopes have no level: for them with-mean is pointwise.
 */
export type BandKind = "pointwise" | "with-mean" | "corrected" | "averaged";

export type TermCurveOptions = {
  /** Number of evenly spaced points over the observed range (default 100); on the log scale for log terms. */
  points?: number;
  /** Values to evaluate at instead, in the column's own unit; level names for a factor, group names for a random effect. */
  at?: Float64Array | readonly number[] | readonly string[];
  /** Which curve, where a term has several: a level of a smooth's `by`, or a group, whose deviation alone is drawn. */
  group?: string;
  /** Probability of the band (default 0.95). */
  level?: number;
  /** What the band allows for (default: what the model's covariance does, the curve's own error). */
  band?: BandKind;
  /** Also give the derivative with respect to ln x: an elasticity, for log links and price-like columns. */
  derivative?: boolean;
};

export type CurveDerivative = {
  estimate: Float64Array;
  standardError: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
};

/** A term's contribution on the link scale over values of its column. */
export type TermCurve = {
  termId: string;
  /** In the column's own unit (never its logarithm); level names for a factor. */
  x: Float64Array | string[];
  estimate: Float64Array;
  standardError: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  observedRange: [number, number] | null;
  /** Fitted rows near each x: within a twentieth of the range's width (on the scale of the basis); for a factor, at the level. */
  supportCount: Float64Array;
  /** 1 where x lies outside the observed range. */
  outside: Uint8Array;
  /** d estimate / d ln x, where asked for. */
  derivative?: CurveDerivative;
};

/** A term's contribution relative to that at one value of its column, on the link scale. */
export type CurveDifference = CurveDerivative & {
  termId: string;
  /** In the column's own unit; names for a factor or random effect. */
  x: Float64Array | string[];
};

export type TermSurfaceOptions = {
  /** Evenly spaced points over each column's observed range (default 30). */
  points?: number;
  /** Probability of the band (default 0.95). */
  level?: number;
};

/**
 * A tensor product's contribution on the link scale over a grid of its two columns; arrays are row-major, the value at
 * x[i] and y[j] at i x (number of y) + j.
 */
export type TermSurface = {
  termId: string;
  /** In each column's own unit. */
  x: Float64Array;
  y: Float64Array;
  estimate: Float64Array;
  standardError: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  /** Fitted rows within a twentieth of both ranges' widths. */
  supportCount: Float64Array;
};

export type TermReport = {
  id: string;
  kind: TermSpec["kind"];
  edf: number;
  penalties: number[];
  /** Smallest and largest contribution over the fitted rows' values. */
  contributionRange: [number, number];
  /** That the term is zero; null with `testReason`. */
  test: TermTest | null;
  /** Why there is no test; null where there is one. */
  testReason: string | null;
  /** That a line would do in place of the curve; null for terms without a penalised curve around a line. */
  curveTest: TermTest | null;
  /**
   * Share of the term's fitted values that all other terms reproduce, 0 to 1; null where its estimate is zero, with local
   * regression, and beyond 300 shared coordinates, where it would take longer than the fit.
   */
  concurvity: number | null;
};

/** A test of some of a model's coefficients being zero. */
export type TermTest = {
  /** F where the dispersion is estimated (the quadratic form over its degrees of freedom), chi-square where it is known. */
  statistic: number;
  distribution: "F" | "chi-square";
  /** Numerator degrees of freedom; 0 where a penalty went to its limit and left nothing to test. */
  referenceDegreesOfFreedom: number;
  /** n - edf; null where the dispersion is known. */
  residualDegreesOfFreedom: number | null;
  pValue: number;
  /** False only where the response is normal and the model has no penalties: then the test is exact. */
  approximate: boolean;
};

export type ModelReport = {
  rowCount: number;
  edf: number;
  terms: TermReport[];
  /** Share of the null deviance, 0 to 1 (below 0 for a model worse than its mean). */
  devianceExplained: number;
  dispersion: number;
  /** Conditional AIC, corrected for the choice of penalties; null with `aicReason`. */
  aic: number | null;
  /** Why there is no AIC, or what its correction leaves out; null otherwise. */
  aicReason: string | null;
  criterion: number;
  converged: boolean;
  /** The model's, and those about terms that others reproduce. */
  warnings: ModelWarning[];
};

/** A larger model against a smaller one that is a special case of it, on the same rows. */
export type ModelComparison = {
  /** F where the dispersion is estimated, chi-square where it is known; null where there is nothing to judge by. */
  statistic: number | null;
  distribution: "F" | "chi-square";
  /** By how many the larger model has more: of 2 tr(F) - tr(FF), or of tr(F) with local regression. */
  degreesOfFreedom: number;
  /** n - edf of the larger model; null where the dispersion is known. */
  residualDegreesOfFreedom: number | null;
  /** Null below half a degree of freedom, and where the larger model reproduces the response exactly. */
  pValue: number | null;
  /** AIC of the larger less that of the smaller: below 0 the larger predicts better. Null where either has none. */
  aicDifference: number | null;
  /** One plain sentence. */
  verdict: string;
};
