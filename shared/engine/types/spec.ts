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
