/** Distribution of the response; the link goes with it (identity, log, log, log, logit). */
export type Family = "gaussian" | "log-gaussian" | "quasi-poisson" | "negative-binomial" | "binomial";

/**
 * How smooth a term is: by REML ("auto"), by the effective degrees of freedom asked for
 * (without the constant), or by a penalty given outright.
 */
export type Smoothness = "auto" | { df: number } | { penalty: number };

type Common = { /** Name of the term; by default its column names joined by ":". */ id?: string };

export type LinearTerm = Common & { kind: "linear"; column: string; log?: boolean };
export type FactorTerm = Common & { kind: "factor"; column: string; reference?: string };
export type SmoothTerm = Common & {
  kind: "smooth"; column: string; log?: boolean; size?: number; smoothness?: Smoothness;
  shape?: "decreasing" | "increasing"; by?: string;
};
export type CyclicSmoothTerm = Common & {
  kind: "cyclic-smooth"; column: string; period: [number, number]; size?: number; smoothness?: Smoothness;
};

export type TermSpec = LinearTerm | FactorTerm | SmoothTerm | CyclicSmoothTerm;

/** An additive model: g(mean) = intercept + sum of terms + offset. */
export type ModelSpec = {
  /** Column that holds the response. */
  response: string;
  family: Family;
  /** Column on the link scale, added to the linear predictor. */
  offset?: string;
  /** Column of prior weights. */
  weights?: string;
  terms: TermSpec[];
};

/** Columns of equal length: numbers, or text for factors and groups. */
export type ModelData = Record<string, Float64Array | readonly number[] | readonly string[]>;
