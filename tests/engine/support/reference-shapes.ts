/** Shapes of what the scripts in tests/engine/reference write; each script says what it holds. */
export type MadeWith = { r: string; packages: Record<string, string>; lapack: string };

export type Columns = Record<string, number[]>;

/** What common.R's summarise_gam gives. */
export type GamSummary = {
  linearPredictor: number[];
  standardError: number[];
  /** Per smooth term, in order. */
  edf: number[];
  totalEdf: number;
  dispersion: number;
  deviance: number;
  nullDeviance: number;
};

export type LinearPrediction = { linearPredictor: number[]; standardError: number[] };

type Drivers = { price: number[]; yearFraction: number[]; promotion: string[] };

export type CountCase = { name: string; data: Drivers & { units: number[] }; fit: GamSummary & { fitted: number[]; theta: number } };

export type ShareCase = { name: string; data: Drivers & { trials: number[]; share: number[] }; fit: GamSummary & { fitted: number[] } };

export type CountsAndShares = { madeWith: MadeWith; negativeBinomial: CountCase[]; binomial: ShareCase[] };

export type VaryingCurves = {
  madeWith: MadeWith;
  byLevel: {
    size: number; data: { x: number[]; area: string[]; y: number[] }; fit: GamSummary; newRows: { x: number[]; area: string[] };
  } & LinearPrediction;
  byNumber: { size: number; data: { x: number[]; amount: number[]; other: number[]; y: number[] }; fit: GamSummary };
  surfaces: {
    /** Of the interaction's two columns, and of both main effects. */
    sizes: [number, number];
    size: number;
    data: { x: number[]; z: number[]; y: number[] };
    fit: GamSummary & { interaction: number[] };
  }[];
};

export type NaturalAndLocal = {
  madeWith: MadeWith;
  natural: {
    data: { x: number[]; promotion: string[]; y: number[] };
    at: number[];
    /** `there`: at `at`, with promotion "feature" where the factor is in the model. */
    fits: ({ df: number; withFactor: boolean; dispersion: number; there: LinearPrediction } & LinearPrediction)[];
  };
  local: {
    data: { x: number[]; y: number[] };
    between: number[];
    fits: {
      degree: 0 | 1 | 2;
      span: number;
      /** Of the linear operator L, and n - tr(2 L - L L'). */
      trace: number;
      residualDegreesOfFreedom: number;
      residualScale: number;
      fitted: number[];
      standardError: number[];
      there: { fitted: number[]; standardError: number[] };
    }[];
  };
};

export type Groups = {
  madeWith: MadeWith;
  stores: {
    data: { x: number[]; store: string[]; depth: number[]; y: number[] };
    /** `storeLevels`: coefficients of the stores in sorted order. */
    levels: GamSummary & { storeLevels: number[] };
    slopes: GamSummary;
  };
  walk: { data: { week: number[]; x: number[]; y: number[] }; fit: GamSummary; walkEdf: number };
  curves: GroupCurves;
  curvesOfCounts: GroupCurves;
};

export type GroupCurves = {
  size: number;
  data: { x: number[]; store: string[]; y: number[] };
  fit: GamSummary;
  partsEdf: { level: number; slope: number; wiggly: number };
};

export type LocalModels = {
  madeWith: MadeWith;
  splines: {
    data: { x: number[]; z: number[]; y: number[] };
    /** Degrees of freedom without the constant. */
    oneTerm: { df: number; terms: number[][] }[];
    twoTerms: { df: [number, number]; terms: number[][] };
  };
  local: {
    data: { x: number[]; z: number[]; promotion: string[]; line: number[]; y: number[] };
    cases: { name: string; fitted: number[]; terms: number[][] }[];
    /** Local lines of x and z: on the rows of `splines`, by package gam; on these rows, by exact backfitting. */
    orthogonal: [number[], number[]];
    backfitted: [number[], number[]];
  };
};

type CurveErrors = { price: number[]; woy: number[] };

/** Standard errors of two curves at every sixth row of some series of `additive-models`, per kind of band. */
export type Bands = {
  madeWith: MadeWith;
  series: {
    series: number;
    gaussian: { pointwise: CurveErrors; withMean: CurveErrors; unconditional: CurveErrors; corrected: CurveErrors };
    quasiPoisson: { pointwise: CurveErrors; withMean: CurveErrors };
  }[];
};

export type TestsOfFit = {
  fit: GamSummary;
  /** Per curve, in order. */
  smooth: { referenceDegreesOfFreedom: number[]; statistic: number[]; pValue: number[] };
  factor: { degreesOfFreedom: number; statistic: number; pValue: number };
  /** Of the fit by restricted likelihood. */
  criteria: { aic: number; logLikelihood: number; degreesOfFreedom: number; edf: number };
};

export type TestsOfTerms = {
  madeWith: MadeWith;
  data: {
    price: number[]; yearFraction: number[]; temperature: number[]; promotion: string[];
    logUnits: number[]; units: number[]; bought: number[];
  };
  /** Multipliers of the three curves' difference penalties where they are given. */
  given: [number, number, number];
  gaussian: TestsOfFit;
  negativeBinomial: TestsOfFit;
  binomial: TestsOfFit;
  nested: {
    df: number; statistic: number; degreesOfFreedom: number; residualDegreesOfFreedom: number; pValue: number; aicDifference: number;
  };
};

type SeriesFit = {
  linearPredictor: number[];
  totalEdf: number;
  dispersion: number;
  /** Of price and season, as multipliers of our difference penalties. */
  penalties: [number, number];
};

export type SeriesOfAll = {
  store: number;
  product: number;
  data: { logmove: number[]; units: number[]; price: number[]; woy: number[]; deal: number[]; feat: number[] };
  gaussian: SeriesFit;
  quasiPoisson: SeriesFit;
};

export type AllSeries = { madeWith: MadeWith; series: SeriesOfAll[] };

type LargeFit = { linearPredictor: number[]; totalEdf: number; dispersion: number };

export type AllRows = {
  madeWith: MadeWith;
  data: Record<"logmove" | "units" | "price" | "woy" | "deal" | "feat" | "store" | "brand", number[]>;
  everything: LargeFit;
  /** Of the rows of product 7. */
  stores: LargeFit;
};
