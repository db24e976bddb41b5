/** What fits.R makes of one product with mgcv. */
export type ReferenceModel = {
  /** First days, in the order of `fitted`. */
  weeks: string[];
  /** Of the response as it was fitted: log(units) or units. */
  fitted: number[];
  standardErrors: number[];
  edf: number;
  termEdf: number[];
  dispersion: number;
  penalties: number[];
  /** Standard deviation of the response. */
  spread: number;
};

export type ReferenceFits = {
  store: string;
  mgcv: string;
  lapack: string;
  products: Record<string, {
    rows: number;
    loglog: { elasticity: number; intercept: number };
    gaussian: ReferenceModel;
    quasiPoisson: ReferenceModel;
  }>;
};
