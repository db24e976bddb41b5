/**
 * Distribution of the response; the link goes with it.
 * gaussian: identity. log-gaussian: ln(response) is normal. quasi-poisson: log link, variance = dispersion x mean.
 */
export type Family = "gaussian" | "log-gaussian" | "quasi-poisson";

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

/** A curve: cubic B-splines on equally spaced knots, `size` of them before centring (default 10). */
export type SmoothTerm = Common & {
  kind: "smooth";
  column: string;
  log?: boolean;
  size?: number;
  smoothness?: Smoothness;
};

/** A curve on a circle: the same splines, wrapped round `period`, `size` of them before centring (default 12). */
export type CyclicSmoothTerm = Common & {
  kind: "cyclic-smooth";
  column: string;
  period: [number, number];
  size?: number;
  smoothness?: Smoothness;
};

export type TermSpec = LinearTerm | FactorTerm | SmoothTerm | CyclicSmoothTerm;

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

export type CyclicSmoothBasis = {
  kind: "cyclic-smooth";
  column: string;
  size: number;
  lower: number;
  upper: number;
  centring: Float64Array;
};

export type TermBasis = LinearBasis | FactorBasis | SmoothBasis | CyclicSmoothBasis;

/** Values seen in the fitted rows, ascending (levels: in order of `levels`), and how many rows had each. */
export type SeenValues = { values: Float64Array | string[]; counts: Float64Array };

export type FittedTerm = {
  id: string;
  kind: TermSpec["kind"];
  columns: string[];
  /** Index of the term's first coefficient in `coefficients`, and how many it has. */
  first: number;
  count: number;
  /** Effective degrees of freedom without the constant: trace of the term's block of (X'WX + S)^-1 X'WX. */
  edf: number;
  /** Multiplier of the second-difference penalty; empty for unpenalised terms. */
  penalties: number[];
  basis: TermBasis;
  /** Smallest and largest value fitted to, in the column's own unit; null for a factor. */
  observedRange: [number, number] | null;
  seen: SeenValues;
};

export type WarningCode =
  | "columns-indistinguishable"
  | "few-distinct-values"
  | "straight-line"
  | "level-without-units"
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
  /** Bayesian posterior covariance of `coefficients`, packed lower triangle: (i, j <= i) at i (i + 1) / 2 + j. */
  covariance: Float64Array;
  terms: FittedTerm[];
  /** Mean of the response per row of the data given; log-gaussian: exp(eta + dispersion / 2). */
  fitted: Float64Array;
  dispersion: number;
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

export type TermCurveOptions = {
  /** Number of evenly spaced points over the observed range (default 100); on the log scale for log terms. */
  points?: number;
  /** Values to evaluate at instead, in the column's own unit; level names for a factor. */
  at?: Float64Array | readonly number[] | readonly string[];
  /** Probability of the band (default 0.95). */
  level?: number;
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

export type TermReport = {
  id: string;
  kind: TermSpec["kind"];
  edf: number;
  penalties: number[];
  /** Smallest and largest contribution over the fitted rows' values. */
  contributionRange: [number, number];
};

export type ModelReport = {
  rowCount: number;
  edf: number;
  terms: TermReport[];
  /** Share of the null deviance, 0 to 1 (below 0 for a model worse than its mean). */
  devianceExplained: number;
  dispersion: number;
  criterion: number;
  converged: boolean;
  warnings: ModelWarning[];
};
