/** A row's predictive distribution needs these, all on the scale of one row. */
export type RowUncertainty = {
  /** Linear predictor, offset included, and the standard error the coefficients give it. */
  linearPredictor: number;
  standardError: number;
  dispersion: number;
  /** Probability the interval holds. */
  level: number;
  /** Standard normal quantile of (1 + level) / 2. */
  quantile: number;
  /** Whether responses can be other than whole numbers. */
  fractional: boolean;
};

export type Interval = { lower: number; upper: number };

/** What every family says about responses and predictions; functions of single rows take and return plain numbers. */
type CommonRules = {
  /** @throws EngineError response-invalid, with row, value and rule. */
  check(response: Float64Array, column: string): void;
  /** Expected response at a linear predictor. */
  mean(linearPredictor: number, dispersion: number): number;
  /** Value half of new rows fall below, or null where the family gives none. */
  median: ((linearPredictor: number) => number) | null;
  meanInterval(row: RowUncertainty): Interval;
  /** Interval of a new row's value; the coefficients' uncertainty is mixed in. */
  observationInterval(row: RowUncertainty): Interval;
};

/** A family whose transformed response is normal: the restricted likelihood is exact and one solve is enough. */
export type ExactRules = CommonRules & {
  fitting: "exact";
  /** Response on the scale of the linear predictor, a new array. */
  transform(response: Float64Array): Float64Array;
};

/** A family fitted by iterated working models (penalised iteratively reweighted least squares). */
export type IterativeRules = CommonRules & {
  fitting: "iterative";
  /** Linear predictor to start from at a response (offset included). */
  start(response: number): number;
  /** Unit deviance at a mean, not negative. */
  unitDeviance(response: number, mean: number): number;
  /** Writes working response (without the offset) and working weight of every row, given predictors and prior weights. */
  working(rows: WorkingRows): void;
  /** Sum of weighted squared Pearson residuals. */
  pearson(response: Float64Array, mean: Float64Array, weights: Float64Array): number;
  /** Mean of the model with intercept and offset only, written per row. */
  nullMean(response: Float64Array, offset: Float64Array, weights: Float64Array): Float64Array;
};

export type WorkingRows = {
  response: Float64Array;
  offset: Float64Array;
  weights: Float64Array;
  linearPredictor: Float64Array;
  mean: Float64Array;
  workingResponse: Float64Array;
  workingWeights: Float64Array;
};

export type FamilyRules = ExactRules | IterativeRules;
