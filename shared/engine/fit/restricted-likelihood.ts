import { backwardSolve, choleskyInPlace, forwardSolve, invertFactored, logDeterminant } from "../linalg/cholesky";
import type { PenaltyBlock } from "./design";
import type { ReducedSystem } from "./reduced-system";

/** The restricted likelihood and all that follows from one set of penalties; arrays are reused by the next evaluation. */
export type LikelihoodState = {
  logPenalties: Float64Array;
  penalties: Float64Array;
  /** 1/2 [(n - Mp) ln(D + b'Sb) + ln|X'WX + S| - ln|S|+]; Infinity where the system is singular. */
  criterion: number;
  /** With respect to the log penalties. */
  gradient: Float64Array;
  hessian: Float64Array;
  /** Of ln|X'WX + S| alone: minus the derivatives of the blocks' effective degrees of freedom. */
  determinantHessian: Float64Array;
  /** Penalised effective degrees of freedom per block: r - penalty x trace of the inverse's block. */
  edf: Float64Array;
  /** b'b per block, in the coordinates where the penalty is the identity. */
  squares: Float64Array;
  coefficients: Float64Array;
  inverse: Float64Array;
  logDeterminant: number;
  /** D + b'Sb. */
  penalisedResidual: number;
};

/** Below this share of z'Wz a residual sum of squares is rounding: the fit is perfect. */
export const perfectShare = 1e-13;

/** @example const state = createState(reduced.size, design.blocks.length); */
export function createState(size: number, blocks: number): LikelihoodState {
  return {
    logPenalties: new Float64Array(blocks),
    penalties: new Float64Array(blocks),
    criterion: Infinity,
    gradient: new Float64Array(blocks),
    hessian: new Float64Array(blocks * blocks),
    determinantHessian: new Float64Array(blocks * blocks),
    edf: new Float64Array(blocks),
    squares: new Float64Array(blocks),
    coefficients: new Float64Array(size),
    inverse: new Float64Array(size * size),
    logDeterminant: 0,
    penalisedResidual: 0,
  };
}

/**
 * Evaluates the restricted likelihood criterion with its exact gradient and Hessian at given log penalties.
 * With H = M + diag(penalties), b = H^-1 v and P = total - v'b:
 * dP/drho_j = l_j b_j'b_j; d ln|H|/drho_j = l_j tr(H^-1)_jj;
 * d2P/drho_j drho_k = [j = k] l_j b_j'b_j - 2 l_j l_k b_j'(H^-1)_jk b_k;
 * d2 ln|H|/drho_j drho_k = [j = k] l_j tr(H^-1)_jj - l_j l_k |(H^-1)_jk|^2.
 * Source: Wood (2011), J. R. Statist. Soc. B 73, sections 2 and 3, in coordinates where each penalty is an identity.
 *
 * @param state receives everything. O(size^3 / 2).
 * @param work size x size values of scratch.
 * @example evaluateLikelihood(reduced, { blocks, logPenalties, work }, state);
 */
export function evaluateLikelihood(
  reduced: ReducedSystem, at: { blocks: readonly PenaltyBlock[]; logPenalties: Float64Array; work: Float64Array }, state: LikelihoodState,
): void {
  const { size, vector, rowCount, unpenalisedKept } = reduced;
  const { blocks, logPenalties, work } = at;
  state.logPenalties.set(logPenalties);
  const { penalties } = state;
  work.set(reduced.matrix);
  let logPenaltyDeterminant = 0;
  for (let j = 0; j < blocks.length; j++) {
    const { start, end } = blocks[j];
    penalties[j] = Math.exp(logPenalties[j]);
    for (let k = start; k < end; k++) work[k * size + k] += penalties[j];
    logPenaltyDeterminant += (end - start) * logPenalties[j];
  }
  if (!choleskyInPlace(work, size)) {
    state.criterion = Infinity;
    return;
  }
  const { coefficients } = state;
  coefficients.set(vector);
  forwardSolve(work, size, coefficients);
  let explained = 0;
  for (let k = 0; k < size; k++) explained += coefficients[k] * coefficients[k];
  backwardSolve(work, size, coefficients);
  state.logDeterminant = logDeterminant(work, size);
  invertFactored(work, size, state.inverse);
  state.penalisedResidual = Math.max(reduced.total - explained, perfectShare * reduced.yardstick, Number.MIN_VALUE * 1e30);
  state.criterion = 0.5 * ((rowCount - unpenalisedKept) * Math.log(state.penalisedResidual)
    + reduced.logDeterminant + state.logDeterminant - logPenaltyDeterminant);
  fillDerivatives(reduced, blocks, state);
}

function fillDerivatives(reduced: ReducedSystem, blocks: readonly PenaltyBlock[], state: LikelihoodState): void {
  const { size } = reduced;
  const { coefficients, inverse, penalties, gradient, edf, squares } = state;
  const freedom = reduced.rowCount - reduced.unpenalisedKept;
  for (let j = 0; j < blocks.length; j++) {
    const { start, end } = blocks[j];
    let trace = 0;
    let square = 0;
    for (let k = start; k < end; k++) {
      trace += inverse[k * size + k];
      square += coefficients[k] * coefficients[k];
    }
    squares[j] = square;
    edf[j] = end - start - penalties[j] * trace;
    gradient[j] = 0.5 * ((freedom * penalties[j] * square) / state.penalisedResidual - edf[j]);
  }
  for (let j = 0; j < blocks.length; j++) {
    for (let k = 0; k <= j; k++) fillSecondDerivative({ state, size, freedom, blocks }, j, k);
  }
}

function fillSecondDerivative(
  of: { state: LikelihoodState; size: number; freedom: number; blocks: readonly PenaltyBlock[] }, j: number, k: number,
): void {
  const { state, blocks, freedom } = of;
  const { penalties, squares, edf, penalisedResidual: residual } = state;
  const count = blocks.length;
  const { form, norm } = blockProducts(state, of.size, blocks[j], blocks[k]);
  const product = penalties[j] * penalties[k];
  let ofDeterminant = -product * norm;
  let ofResidual = -2 * product * form;
  if (j === k) {
    ofDeterminant += blocks[j].end - blocks[j].start - edf[j];
    ofResidual += penalties[j] * squares[j];
  }
  const slopes = ((penalties[j] * squares[j]) / residual) * ((penalties[k] * squares[k]) / residual);
  const value = 0.5 * (freedom * (ofResidual / residual - slopes) + ofDeterminant);
  state.hessian[j * count + k] = value;
  state.hessian[k * count + j] = value;
  state.determinantHessian[j * count + k] = ofDeterminant;
  state.determinantHessian[k * count + j] = ofDeterminant;
}

/** b_j'(H^-1)_jk b_k and the sum of squares of (H^-1)_jk. */
function blockProducts(
  state: LikelihoodState, size: number, left: PenaltyBlock, right: PenaltyBlock,
): { form: number; norm: number } {
  const { coefficients, inverse } = state;
  let form = 0;
  let norm = 0;
  for (let row = left.start; row < left.end; row++) {
    let sum = 0;
    for (let column = right.start; column < right.end; column++) {
      const value = inverse[row * size + column];
      sum += value * coefficients[column];
      norm += value * value;
    }
    form += coefficients[row] * sum;
  }
  return { form, norm };
}
