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
