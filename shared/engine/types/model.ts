import type { TermBasis } from "./basis";
import type { ModelSpec, TermSpec } from "./spec";

/**
 * Values seen in the fitted rows, ascending (levels: in order of `levels`), and how many rows had each. Of a tensor product
 * the pairs seen, the second column's values in `second`; of curves per level or group also what each of them saw.
 */
export type SeenValues = {
  values: Float64Array | string[];
  counts: Float64Array;
  second?: Float64Array;
  byLevel?: { values: Float64Array; counts: Float64Array }[];
};

export type FittedTerm = {
  id: string;
  kind: TermSpec["kind"];
  columns: string[];
  /** Index of the term's first coefficient in `coefficients`, and how many it has. */
  first: number;
  count: number;
  /** Effective degrees of freedom without the constant: trace of the term's block of (X'WX + S)^-1 X'WX. */
  edf: number;
  /**
   * Multipliers of the term's penalties, empty for unpenalised terms. One for a curve; one per level for a curve per level;
   * one per column for a tensor product; level, slope and wiggly part for curves per group.
   */
  penalties: number[];
  basis: TermBasis;
  /** Smallest and largest value fitted to, in the column's own unit; null for a factor, a random effect and a tensor product. */
  observedRange: [number, number] | null;
  seen: SeenValues;
  /** Where its coordinates stand in `information`: first unpenalised and first penalised among the shared, or first within each group's block. */
  layout: { unpenalisedFirst: number; penalisedFirst: number; groupFirst: number | null };
};

/**
 * X'WX of the last working model in fitting coordinates (in which every penalty is diagonal), and what tests, information
 * criteria and influence are computed from. Shared coordinates: `unpenalised` ones first, then the penalised.
 */
export type ModelInformation = {
  unpenalised: number;
  size: number;
  /** Packed lower triangle over the shared coordinates. */
  shared: Float64Array;
  /** Shared coordinates left out because earlier ones reproduce them. */
  dropped: number[];
  /** Estimates of the shared coordinates. */
  coordinates: Float64Array;
  /** Second derivatives of the criterion by the log penalties, in the order of terms and their penalties; row-major. */
  criterionHessian: Float64Array;
  groups: GroupInformation | null;
};

/** Blocks of one grouping column, eliminated group by group: `count` groups of `size` coordinates each. */
export type GroupInformation = {
  count: number;
  size: number;
  /** count x packed lower triangle of X_g'WX_g. */
  own: Float64Array;
  /** count x size x shared size, row-major: X_g'WX_shared. */
  cross: Float64Array;
  /** count x size. */
  coordinates: Float64Array;
};

/**
 * Covariance of the coefficients of groups in block-arrow form. With V that of the shared coefficients and L_g = link:
 * cov(g, shared) = -L_g V, cov(g, h) = L_g V L_h' + [g = h] own_g.
 */
export type GroupCovariance = {
  count: number;
  /** Coefficients of one group, over all its terms. */
  size: number;
  /** Per own coefficient of a group, the coefficient index for group 0 and the step from one group to the next. */
  first: number[];
  step: number[];
  /** count x size x (number of shared coefficients), row-major. */
  link: Float64Array;
  /** count x packed lower triangle. */
  own: Float64Array;
};

export type WarningCode =
  | "columns-indistinguishable"
  | "few-distinct-values"
  | "straight-line"
  | "penalty-raised"
  | "level-without-units"
  | "separation"
  | "concurvity"
  | "perfect-fit"
  | "not-converged";

/**
 * What a model's covariance allows for. pointwise: the coefficients' error, penalties taken as known, as a fit leaves it.
 * corrected, averaged: the error of chosen penalties too, as `bandModel` makes it.
 */
export type ModelBand = "pointwise" | "corrected" | "averaged";

export type ModelWarning = { code: WarningCode; message: string; term?: string };

/** A fitted model as plain data. Coefficients: the intercept first, then each term's at `terms[].first`. */
export type FittedModel = {
  format: 1;
  spec: ModelSpec;
  /** Rows fitted to (weight above zero). */
  rowCount: number;
  coefficients: Float64Array;
  coefficientNames: string[];
  /**
   * Bayesian posterior covariance of the shared coefficients (all but those of eliminated groups, which come last), packed
   * lower triangle: (i, j <= i) at i (i + 1) / 2 + j. `band` says what it allows for.
   */
  covariance: Float64Array;
  /** Which band predictions and curves have: nothing that is in the covariance is added again. */
  band: ModelBand;
  /** Covariance of the coefficients of groups, where the model has terms on groups. */
  groupCovariance: GroupCovariance | null;
  terms: FittedTerm[];
  /** Null with local regression, which has no such form. */
  information: ModelInformation | null;
  /** Mean of the response per row of the data given; log-gaussian: exp(eta + dispersion / 2). */
  fitted: Float64Array;
  dispersion: number;
  /** Of the negative binomial, variance = mean + mean^2 / theta; null for other families. */
  theta: number | null;
  /** Log-likelihood at the estimates; null for quasi families, which have none. */
  logLikelihood: number | null;
  /** Total effective degrees of freedom, intercept included. */
  edf: number;
  deviance: number;
  nullDeviance: number;
  /** Restricted likelihood criterion (smaller is better), comparable between fits of the same spec to the same data. */
  criterion: number;
  /** Whether the response has values that are not whole numbers (sold by weight). */
  fractionalResponse: boolean;
  converged: boolean;
  iterations: number;
  warnings: ModelWarning[];
};
