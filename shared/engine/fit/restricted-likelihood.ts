import { crossArrow } from "./arrow-derivatives";
import type { ArrowSystem } from "./arrow-system";
import { solveArrow } from "./arrow-system";
import { traceArrow } from "./arrow-trace";
import type { DenseSystem } from "./dense-system";
import { crossDense, solveDense, traceDense } from "./dense-system";
import type { LikelihoodState } from "./likelihood-state";
import type { PenaltyLayout } from "./penalties";
import { penaltyDeterminant } from "./penalties";

/** A penalised least-squares problem, ready for trials of its penalties. */
export type PenalisedSystem = DenseSystem | ArrowSystem;

/** Whether the response's scale is estimated along, or known to be 1. */
export type Scale = "unknown" | "known";

/** Below this share of z'Wz a residual sum of squares is rounding: the fit is perfect. */
export const perfectShare = 1e-13;
/** Of a response without any variation z'Wz is zero too; the square of its reciprocal must stay finite. */
const leastResidual = 1e-100;

export type LikelihoodProblem = {
  system: PenalisedSystem;
  layout: PenaltyLayout;
  scale: Scale;
  /** Where shapes hold some curves: how many constraints per penalty are held, and the problem without them. */
  held?: { perPenalty: Int32Array; unshaped: LikelihoodProblem };
};

/**
 * Evaluates estimates and the restricted likelihood criterion at given log penalties; the derivatives follow by `differentiate`.
 * Source: Wood (2011), J. R. Statist. Soc. B 73, sections 2 and 3, in coordinates where each penalty is diagonal.
 *
 * @param state receives everything at level "criterion". O(size^3 / 6) (with groups: linear in their number).
 * @example evaluateLikelihood({ system, layout, scale: "unknown" }, logPenalties, state);
 */
export function evaluateLikelihood(problem: LikelihoodProblem, logPenalties: Float64Array, state: LikelihoodState): void {
  const { system, layout, scale } = problem;
  const { penalties } = layout;
  state.level = "criterion";
  state.logPenalties.set(logPenalties);
  for (let j = 0; j < penalties.length; j++) state.multipliers[j] = Math.exp(logPenalties[j]);
  const solved = system.form === "dense" ? solveDense(system, penalties, state) : solveArrow(system, penalties, state);
  if (!solved) {
    state.criterion = Infinity;
    return;
  }
  penaltyDeterminant(layout, logPenalties, state.determinant);
  state.penalisedResidual = Math.max(state.penalisedResidual, perfectShare * system.yardstick, leastResidual);
  const fit = scale === "known" ? state.penalisedResidual : (system.rowCount - system.unpenalisedKept) * Math.log(state.penalisedResidual);
  state.criterion = 0.5 * (fit + system.logDeterminant + state.logDeterminant - state.determinant.value);
}

/**
 * Fills the gradient, and the exact Hessian where asked for, of the criterion at the state's log penalties; does nothing
 * where they are there already. With H = X'WX + S, b the estimates, P = D + b'Sb and penalty j of multiplier l_j, diagonal D_j:
 * dP/drho_j = l_j b'D_j b; d ln|H|/drho_j = l_j tr(H^-1 D_j);
 * d2P/drho_j drho_k = [j = k] l_j b'D_j b - 2 l_j l_k b'D_j H^-1 D_k b;
 * d2 ln|H|/drho_j drho_k = [j = k] l_j tr(H^-1 D_j) - l_j l_k tr(H^-1 D_j H^-1 D_k).
 *
 * @param state of a finite criterion. O(size^3 / 3), and O(size^2) for the Hessian.
 */
export function differentiate(problem: LikelihoodProblem, state: LikelihoodState, level: "gradient" | "hessian"): void {
  const { system, layout: { penalties } } = problem;
  if (state.level === "criterion") {
    if (system.form === "dense") traceDense(system, penalties, state);
    else traceArrow(system, penalties, state);
    fillGradient(problem, state);
    state.level = "gradient";
  }
  if (level === "hessian" && state.level === "gradient") {
    if (system.form === "dense") crossDense(system, penalties, state);
    else crossArrow(system, penalties, state);
    fillHessian(problem, state);
    state.level = "hessian";
  }
}

/** How strongly a change of P moves the criterion's first part: (n - Mp) / P, or 1 where the scale is known. */
const residualWeight = ({ system, scale }: LikelihoodProblem, state: LikelihoodState): number =>
  (scale === "known" ? 1 : (system.rowCount - system.unpenalisedKept) / state.penalisedResidual);

function fillGradient(problem: LikelihoodProblem, state: LikelihoodState): void {
  const { gradient, edf, squares, traces, multipliers, determinant } = state;
  const weight = residualWeight(problem, state);
  for (let j = 0; j < gradient.length; j++) {
    edf[j] = determinant.ranks[j] - multipliers[j] * traces[j];
    gradient[j] = 0.5 * (weight * multipliers[j] * squares[j] - edf[j]);
  }
}

function fillHessian(problem: LikelihoodProblem, state: LikelihoodState): void {
  const { hessian, determinantHessian, squares, traces, multipliers, forms, norms, determinant } = state;
  const count = squares.length;
  const weight = residualWeight(problem, state);
  // ln P bends by its own slope squared, which a known scale's P does not.
  const bend = problem.scale === "known" ? 0 : weight / state.penalisedResidual;
  for (let j = 0; j < count; j++) {
    for (let k = 0; k < count; k++) {
      const at = j * count + k;
      const product = multipliers[j] * multipliers[k];
      let ofDeterminant = -product * norms[at] - determinant.hessian[at];
      let ofResidual = -2 * product * forms[at];
      if (j === k) {
        ofDeterminant += multipliers[j] * traces[j];
        ofResidual += multipliers[j] * squares[j];
      }
      hessian[at] = 0.5 * (weight * ofResidual - bend * product * squares[j] * squares[k] + ofDeterminant);
      determinantHessian[at] = ofDeterminant;
    }
  }
}
