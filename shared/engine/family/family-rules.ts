/** A row's predictive distribution needs these, all on the scale of one row. */
export type RowUncertainty = {
  /** Linear predictor, offset included, and the standard error the coefficients give it. */
  linearPredictor: number;
  standardError: number;
  dispersion: number;
  /** Of the negative binomial; others ignore it. */
  theta: number;
  /** Probability the interval holds. */
  level: number;
  /** Standard normal quantile of (1 + level) / 2. */
  quantile: number;
  /** Whether responses can be other than whole numbers. */
  fractional: boolean;
};

export type Interval = { lower: number; upper: number };

/** One value per fitted row. Weights are prior weights (binomial: trials), all above zero. */
export type LikelihoodRows = {
  response: Float64Array;
  /** Offset included. */
  linearPredictor: Float64Array;
  weights: Float64Array;
  theta: number;
};

/** A row and what its model says of it, to judge it by. */
export type ResidualRow = {
  response: number;
  linearPredictor: number;
  /** Prior weight: divides the dispersion; binomial: trials; of no meaning to the negative binomial. */
  weight: number;
  dispersion: number;
  theta: number;
  fractional: boolean;
};

/** What every family says about responses and predictions; functions of single rows take and return plain numbers. */
type CommonRules = {
  /** "known": variance is a function of the mean (and theta) alone, dispersion 1. "unknown": times a dispersion to be estimated. */
  scale: "known" | "unknown";
  /**
   * Whether a model can be fitted to these responses.
   *
   * @throws EngineError response-invalid, with row, value and rule.
   */
  check(response: Float64Array, column: string): void;
  /**
   * Whether each could be a response by itself.
   *
   * @throws EngineError as `check`.
   */
  checkValues(response: Float64Array, column: string): void;
  /** Expected response at a linear predictor. */
  mean(linearPredictor: number, dispersion: number): number;
  /** Value half of new rows fall below, or null where the family gives none (counts, shares and quasi families). */
  median: ((linearPredictor: number) => number) | null;
  /**
   * Log-likelihood on the response's own scale, every constant included; null for quasi families, which have none. Unknown
   * scale: at the variance that maximises it, deviance / n (as R's AIC has it). Always finite.
   */
  logLikelihood: ((rows: LikelihoodRows) => number) | null;
  meanInterval(row: RowUncertainty): Interval;
  /** Interval of a new row's value, the coefficients' uncertainty mixed in; null where only the mean can be predicted. */
  observationInterval: ((row: RowUncertainty) => Interval) | null;
  /**
   * Standard normal quantile of the response's place in its distribution; between the two ends of a count's place at `uniform`,
   * from 0 to 1. Counts, amounts and shares stay within 8.2 of 0.
   */
  quantileResidual(row: ResidualRow, uniform: number): number;
};

/** A family whose transformed response is normal: the restricted likelihood is exact and one solve is enough. */
export type ExactRules = CommonRules & {
  fitting: "exact";
  /** Response on the scale of the linear predictor, a new array. */
  transform(response: Float64Array): Float64Array;
};

/**
 * A family fitted by iterated working models (penalised iteratively reweighted least squares). `theta` is read by the
 * negative binomial alone; any number does for the others.
 */
export type IterativeRules = CommonRules & {
  fitting: "iterative";
  /** Linear predictors to start from (offset included), one per row, a new array. */
  start(rows: { response: Float64Array; weights: Float64Array }): Float64Array;
  /** Variance of a row of weight and dispersion 1 at a mean. */
  variance(mean: number, theta: number): number;
  /** Unit deviance at a mean, not negative. */
  unitDeviance(response: number, mean: number, theta: number): number;
  /**
   * Writes working response (without the offset) and working weight (expected information) of every row, given predictors,
   * means, prior weights and theta.
   */
  working(rows: WorkingRows): void;
  /** Sum of weighted squared Pearson residuals. */
  pearson(rows: MeanRows): number;
  /** Mean of the maximum likelihood model with intercept and offset only, written per row. */
  nullMean(rows: NullRows): Float64Array;
  /**
   * Theta by maximum likelihood given the means, within 1e-3 to 1e7; null for families without one. Means that are the
   * responses themselves (as at the start of a fit) say nothing of it: begin with theta 1 and estimate from the second
   * working model on.
   */
  estimateTheta: ((rows: ThetaRows) => number) | null;
};

export type WorkingRows = {
  response: Float64Array;
  offset: Float64Array;
  weights: Float64Array;
  linearPredictor: Float64Array;
  mean: Float64Array;
  theta: number;
  workingResponse: Float64Array;
  workingWeights: Float64Array;
};

export type MeanRows = { response: Float64Array; mean: Float64Array; weights: Float64Array; theta: number };

export type NullRows = { response: Float64Array; offset: Float64Array; weights: Float64Array; theta: number };

/** `start`: theta of the last working model. */
export type ThetaRows = { response: Float64Array; mean: Float64Array; weights: Float64Array; start: number };

export type FamilyRules = ExactRules | IterativeRules;
