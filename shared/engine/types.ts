/**
 * Distribution of the response; the link goes with it.
 * gaussian: identity. log-gaussian: ln(response) is normal. quasi-poisson: log link, variance = dispersion x mean.
 * negative-binomial: log link, variance = mean + mean^2 / theta, theta estimated. binomial: logit link, the response a
 * share from 0 to 1 and the weights its number of trials.
 */
export type Family = "gaussian" | "log-gaussian" | "quasi-poisson" | "negative-binomial" | "binomial";

/**
 * How smooth a term is: by REML ("auto"), by the effective degrees of freedom asked for (without the constant),
 * or by the multiplier of the difference penalty given outright.
 */
export type Smoothness = "auto" | { df: number } | { penalty: number };

type Common = {
  /** Name of the term; by default its column name. */
  id?: string;
};

/** A straight line in the column, or in its natural logarithm. */
export type LinearTerm = Common & { kind: "linear"; column: string; log?: boolean };

/** One coefficient per level beside the reference (default: the first level in sorted order), unpenalised. */
export type FactorTerm = Common & { kind: "factor"; column: string; reference?: string };

/**
 * A curve: cubic B-splines on equally spaced knots, `size` of them before centring (default 10). `by` a column of numbers:
 * the curve times that number, not centred. `by` a column of text: one curve per level, each with its own penalty, knots
 * over the whole column, each centred over its level's rows. `shape`: the curve never rises, or never falls.
 */
export type SmoothTerm = Common & {
  kind: "smooth";
  column: string;
  log?: boolean;
  size?: number;
  smoothness?: Smoothness;
  shape?: Shape;
  by?: string;
};

export type Shape = "decreasing" | "increasing";

/** A curve on a circle: the same splines, wrapped round `period`, `size` of them before centring (default 12). */
export type CyclicSmoothTerm = Common & {
  kind: "cyclic-smooth";
  column: string;
  period: [number, number];
  size?: number;
  smoothness?: Smoothness;
};

/** A regression spline: natural cubic, boundary knots at the range and df - 1 inner knots at quantiles, unpenalised. */
export type NaturalSplineTerm = Common & { kind: "natural-spline"; column: string; log?: boolean; df: number };

/** A local polynomial of `degree` (default 1) over the nearest span x rows, tricube weights. For up to 2,000 rows. */
export type LocalRegressionTerm = Common & { kind: "local-regression"; column: string; log?: boolean; span: number; degree?: 0 | 1 | 2 };

/** What two columns do together beyond what each does alone (their main effects are removed); `sizes` default 5 and 5. */
export type TensorProductTerm = Common & {
  kind: "tensor-product";
  columns: [string, string];
  sizes?: [number, number];
  smoothness?: Smoothness;
};

/** A slowly moving level over whole-numbered weeks: first differences are penalised; held flat after the last week. */
export type RandomWalkTerm = Common & { kind: "random-walk"; column: string; smoothness?: Smoothness };

/** A level (or, with `by`, a slope in that column) per group, shrunk to zero by one ridge. */
export type RandomEffectTerm = Common & { kind: "random-effect"; column: string; by?: string; smoothness?: Smoothness };

/** One curve per group as a deviation from the column's own smooth: level, slope and wiggly part, a penalty for each. */
export type FactorSmoothTerm = Common & {
  kind: "factor-smooth";
  column: string;
  log?: boolean;
  group: string;
  size?: number;
  smoothness?: Smoothness;
};

export type TermSpec =
  | LinearTerm | FactorTerm | SmoothTerm | CyclicSmoothTerm | NaturalSplineTerm | LocalRegressionTerm | TensorProductTerm
  | RandomWalkTerm | RandomEffectTerm | FactorSmoothTerm;

/** An additive model: link(mean) = intercept + sum of terms + offset. */
export type ModelSpec = {
  /** Column that holds the response. */
  response: string;
  family: Family;
  /** Column on the link scale, added to the linear predictor. */
  offset?: string;
  /** Column of prior weights; rows of weight zero are left out of the fit. */
  weights?: string;
  terms: TermSpec[];
};

/** Columns of equal length: numbers, or text for factors. */
export type ModelData = Record<string, Float64Array | readonly number[] | readonly string[]>;

export type FitOptions = {
  /** Limit of working-model updates for iterative families (default 200). */
  maxIterations?: number;
};

/** A column as learnt for a straight line: the value that enters is x (or ln x) less `centre`. */
export type LinearBasis = { kind: "linear"; column: string; log: boolean; centre: number; scale: number };

export type FactorBasis = { kind: "factor"; column: string; levels: string[]; reference: string };

/** Knots `lower + step x k`; `centring` is the mean of each spline over the fitted rows. */
export type SmoothBasis = {
  kind: "smooth";
  column: string;
  log: boolean;
  size: number;
  lower: number;
  upper: number;
  centring: Float64Array;
};

/** A smooth times a number: coefficients are of the splines themselves, nothing is centred. */
export type ScaledSmoothBasis = Omit<SmoothBasis, "kind" | "centring"> & { kind: "scaled-smooth"; by: string };

/**
 * A smooth per level of `by`: column level x size + k is spline k of that level. `centring`, levels x size, is the mean of
 * each level's splines over that level's rows.
 */
export type LevelledSmoothBasis = Omit<SmoothBasis, "kind"> & { kind: "levelled-smooth"; by: string; levels: string[] };

export type CyclicSmoothBasis = {
  kind: "cyclic-smooth";
  column: string;
  size: number;
  lower: number;
  upper: number;
  centring: Float64Array;
};

/** B-splines on the knots (both boundary knots included once); its curve is natural by the term's coordinates. */
export type NaturalSplineBasis = { kind: "natural-spline"; column: string; log: boolean; knots: Float64Array; centring: Float64Array };

/** Coefficients are the pooled partial residuals at the distinct values `at`, whose local fits the curve is made of. */
export type LocalRegressionBasis = {
  kind: "local-regression";
  column: string;
  log: boolean;
  /** Nearest rows taken, and the degree of the polynomial. */
  neighbours: number;
  degree: number;
  /** Distinct values on the fitting scale, ascending; rows and total weight at each; mean of the curve's rows. */
  at: Float64Array;
  rows: Float64Array;
  weights: Float64Array;
  centring: Float64Array;
};

/** Column i x (second size) + j is spline i of the first column times spline j of the second; main effects are removed by the coordinates. */
export type TensorProductBasis = {
  kind: "tensor-product";
  margins: [SmoothBasis, SmoothBasis];
  /** Smallest and largest value of each column. */
  ranges: [[number, number], [number, number]];
};

/** One column per week from `first` to `last`, weeks without rows too. */
export type RandomWalkBasis = { kind: "random-walk"; column: string; first: number; last: number; centring: Float64Array };

export type RandomEffectBasis = { kind: "random-effect"; column: string; by: string | null; levels: string[] };

/** Column level x size + k is spline k of that group. `centre` and `spread` of the column over all rows make the slope. */
export type FactorSmoothBasis = Omit<SmoothBasis, "kind" | "centring"> & {
  kind: "factor-smooth";
  group: string;
  levels: string[];
  /** Row-major size x size: coefficients of one group = matrix x its coordinates (level, slope, wiggly part). */
  toCoefficients: Float64Array;
};

export type TermBasis =
  | LinearBasis | FactorBasis | SmoothBasis | ScaledSmoothBasis | LevelledSmoothBasis | CyclicSmoothBasis | NaturalSplineBasis
  | LocalRegressionBasis | TensorProductBasis | RandomWalkBasis | RandomEffectBasis | FactorSmoothBasis;

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
   * lower triangle: (i, j <= i) at i (i + 1) / 2 + j.
   */
  covariance: Float64Array;
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
  /** What the band allows for (default "pointwise"). */
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
