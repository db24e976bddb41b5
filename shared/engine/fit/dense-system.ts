import { backwardSolve, choleskyInPlace, forwardSolve, invertFactored, logDeterminant } from "../linalg/cholesky";
import type { DroppedColumn } from "../linalg/dropping-cholesky";
import type { LikelihoodState } from "./likelihood-state";
import type { Penalty } from "./penalties";

/** What every penalised least-squares problem has, whatever was eliminated from it before. */
export type SystemParts = {
  /** Coordinates that each trial of the penalties solves for. */
  size: number;
  /** Coordinates without a penalty, and those of them that are kept (Mp). */
  unpenalised: number;
  unpenalisedKept: number;
  dropped: DroppedColumn[];
  /** Row-major size x size, and right-hand side. */
  matrix: Float64Array;
  vector: Float64Array;
  /** Diagonal before any elimination: what is rounding in `matrix` is measured by it. */
  diagonal: Float64Array;
  /** Weighted residual sum of squares of what was eliminated alone (of nothing: z'Wz). */
  total: number;
  /** z'Wz, the yardstick for what is rounding in `total`. */
  yardstick: number;
  /** Log-determinant of what was eliminated. */
  logDeterminant: number;
  rowCount: number;
};

/** The penalised coordinates' problem after the unpenalised ones are eliminated; `matrix` is the Schur complement, both triangles. */
export type DenseSystem = SystemParts & {
  form: "dense";
  /** Factor L of the unpenalised block, L^-1 A_0q and L^-1 b_0, for going back. */
  factor: Float64Array;
  cross: Float64Array;
  solved: Float64Array;
};

/**
 * Estimates, log-determinant and penalised residual at the state's multipliers: H = M + S, b = H^-1 v. O(size^3 / 6).
 *
 * @returns false where H is singular.
 */
export function solveDense(system: DenseSystem, penalties: readonly Penalty[], state: LikelihoodState): boolean {
  const { size, vector } = system;
  const { factor, coefficients, multipliers } = state;
  factor.set(system.matrix);
  for (let j = 0; j < penalties.length; j++) addPenalty(penalties[j], multipliers[j], factor, size);
  if (!choleskyInPlace(factor, size)) return false;
  coefficients.set(vector);
  forwardSolve(factor, size, coefficients);
  let explained = 0;
  for (let k = 0; k < size; k++) explained += coefficients[k] * coefficients[k];
  backwardSolve(factor, size, coefficients);
  state.logDeterminant = logDeterminant(factor, size);
  state.penalisedResidual = system.total - explained;
  return true;
}

/** Adds multiplier x diagonal to a row-major matrix in whose coordinates the penalty's are counted. */
export function addPenalty(penalty: Penalty, multiplier: number, matrix: Float64Array, size: number): void {
  const { start, end, diagonal } = penalty;
  for (let k = start; k < end; k++) matrix[k * (size + 1)] += diagonal === null ? multiplier : multiplier * diagonal[k - start];
}

/** Inverse, squares and traces. The factor is spent. O(size^3 / 3). */
export function traceDense(system: DenseSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const { size } = system;
  invertFactored(state.factor, size, state.inverse);
  for (let j = 0; j < penalties.length; j++) traceOwn(penalties[j], { state, size, offset: 0, j });
}

/** b'Db and tr(H^-1 D) of one penalty whose coordinates begin at `offset`. */
export function traceOwn(penalty: Penalty, of: { state: LikelihoodState; size: number; offset: number; j: number }): void {
  const { state: { inverse, coefficients, traces, squares }, size, offset, j } = of;
  const { start, end, diagonal } = penalty;
  let trace = 0;
  let square = 0;
  for (let k = start; k < end; k++) {
    const at = offset + k;
    const weight = diagonal === null ? 1 : diagonal[k - start];
    trace += weight * inverse[at * (size + 1)];
    square += weight * coefficients[at] * coefficients[at];
  }
  traces[j] = trace;
  squares[j] = square;
}

/** b'D_j H^-1 D_k b and tr(H^-1 D_j H^-1 D_k) for every pair. O(size^2). */
export function crossDense(system: DenseSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const count = penalties.length;
  for (let j = 0; j < count; j++) {
    for (let k = 0; k <= j; k++) {
      pairProducts(penalties[j], penalties[k], { state, size: system.size, offset: 0, at: j * count + k });
      state.forms[k * count + j] = state.forms[j * count + k];
      state.norms[k * count + j] = state.norms[j * count + k];
    }
  }
}

/** The pair's form and norm, over coordinates that begin at `offset`. */
export function pairProducts(
  left: Penalty, right: Penalty, of: { state: LikelihoodState; size: number; offset: number; at: number },
): void {
  const { state: { coefficients, inverse, forms, norms }, size, offset, at } = of;
  let form = 0;
  let norm = 0;
  for (let row = left.start; row < left.end; row++) {
    const rowWeight = left.diagonal === null ? 1 : left.diagonal[row - left.start];
    const from = (offset + row) * size + offset;
    let sum = 0;
    let squares = 0;
    for (let column = right.start; column < right.end; column++) {
      const value = inverse[from + column];
      const weight = right.diagonal === null ? 1 : right.diagonal[column - right.start];
      sum += weight * value * coefficients[offset + column];
      squares += weight * value * value;
    }
    form += rowWeight * coefficients[offset + row] * sum;
    norm += rowWeight * squares;
  }
  forms[at] = form;
  norms[at] = norm;
}
