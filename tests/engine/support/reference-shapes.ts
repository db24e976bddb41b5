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
