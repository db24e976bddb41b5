import type { ArrowState } from "./arrow-system";
import { createDeterminant } from "./penalties";
import type { PenaltyDeterminant } from "./penalties";

/**
 * The restricted likelihood and all that follows from one set of penalties; arrays are reused by the next evaluation.
 * `level` says how much is filled: the criterion and estimates only, or the gradient, or the second derivatives too.
 */
export type LikelihoodState = {
  level: "criterion" | "gradient" | "hessian";
  logPenalties: Float64Array;
  multipliers: Float64Array;
  /** 1/2 [(n - Mp) ln(D + b'Sb) + ln|X'WX + S| - ln|S|+], with D + b'Sb itself where the scale is known; Infinity where singular. */
  criterion: number;
  /** D + b'Sb. */
  penalisedResidual: number;
  /** ln|X'WX + S| without the part of unpenalised columns eliminated before. */
  logDeterminant: number;
  determinant: PenaltyDeterminant;
  /** With respect to the log penalties. */
  gradient: Float64Array;
  hessian: Float64Array;
  /** Of ln|X'WX + S| - ln|S|+ alone: minus the derivatives of the penalties' effective degrees of freedom. */
  determinantHessian: Float64Array;
  /** Effective degrees of freedom under each penalty: rank - multiplier x trace of the inverse with the penalty. */
  edf: Float64Array;
  /** b'Db and tr(H^-1 D) per penalty with diagonal D. */
  squares: Float64Array;
  traces: Float64Array;
  /** b'D_j H^-1 D_k b and tr(H^-1 D_j H^-1 D_k), row-major. */
  forms: Float64Array;
  norms: Float64Array;
  /** Estimates and (from level gradient) inverse over the system's coordinates; the factor L of its matrix. */
  coefficients: Float64Array;
  factor: Float64Array;
  inverse: Float64Array;
  arrow: ArrowState | null;
};

/** @example const state = createState({ size: 17, penalties: 2, arrow: null }); */
export function createState(of: { size: number; penalties: number; arrow: ArrowState | null }): LikelihoodState {
  const { size, penalties } = of;
  const pairs = penalties * penalties;
  return {
    level: "criterion",
    logPenalties: new Float64Array(penalties), multipliers: new Float64Array(penalties),
    criterion: Infinity, penalisedResidual: 0, logDeterminant: 0,
    determinant: createDeterminant(penalties),
    gradient: new Float64Array(penalties), hessian: new Float64Array(pairs), determinantHessian: new Float64Array(pairs),
    edf: new Float64Array(penalties), squares: new Float64Array(penalties), traces: new Float64Array(penalties),
    forms: new Float64Array(pairs), norms: new Float64Array(pairs),
    coefficients: new Float64Array(size), factor: new Float64Array(size * size), inverse: new Float64Array(size * size),
    arrow: of.arrow,
  };
}
