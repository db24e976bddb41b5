import { backwardSolve, choleskyInPlace, forwardSolve, invertFactored, logDeterminant } from "../linalg/cholesky";
import { choleskyDropping } from "../linalg/dropping-cholesky";
import type { DroppedColumn } from "../linalg/dropping-cholesky";
import type { LikelihoodState } from "./likelihood-state";
import type { NormalEquations } from "./normal-equations";
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
 * Eliminates the unpenalised columns once, so that each trial of the penalties costs only the penalised ones:
 * M = A_qq - A_q0 A_00^-1 A_0q. Columns that earlier ones reproduce are dropped.
 *
 * @param known columns dropped before on the same design, or null to decide.
 * @example const system = eliminateUnpenalised(equations, { unpenalised: 3, size: 20, rowCount: 110 }, null);
 */
export function eliminateUnpenalised(
  equations: NormalEquations, layout: { unpenalised: number; size: number; rowCount: number }, known: DroppedColumn[] | null,
): DenseSystem {
  const { unpenalised, size, rowCount } = layout;
  const penalised = size - unpenalised;
  const { factor, dropped } = factorUnpenalised(equations, layout, known);
  const solved = equations.vector.slice(0, unpenalised);
  const cross = new Float64Array(unpenalised * penalised);
  for (let row = 0; row < penalised; row++) {
    for (let k = 0; k < unpenalised; k++) cross[k * penalised + row] = equations.matrix[(unpenalised + row) * size + k];
  }
  for (const { column } of dropped) {
    solved[column] = 0;
    cross.fill(0, column * penalised, (column + 1) * penalised);
  }
  forwardSolve(factor, unpenalised, solved);
  forwardSolveMany(factor, unpenalised, cross, penalised);
  let { total } = equations;
  for (let k = 0; k < unpenalised; k++) total -= solved[k] * solved[k];
  const diagonal = new Float64Array(penalised);
  for (let k = 0; k < penalised; k++) diagonal[k] = equations.matrix[(unpenalised + k) * (size + 1)];
  const { matrix, vector } = schurComplement(equations, { cross, solved, unpenalised, size });
  return {
    form: "dense",
    size: penalised,
    diagonal, matrix, vector,
    total, factor, cross, solved, unpenalised, dropped, rowCount,
    yardstick: equations.total,
    logDeterminant: logDeterminant(factor, unpenalised),
    unpenalisedKept: unpenalised - dropped.length,
  };
}

/** Factor of the unpenalised block, and which of its columns earlier ones reproduce. */
export function factorUnpenalised(
  equations: NormalEquations, { unpenalised, size }: { unpenalised: number; size: number }, known: DroppedColumn[] | null,
): { factor: Float64Array; dropped: DroppedColumn[] } {
  const factor = new Float64Array(unpenalised * unpenalised);
  for (let row = 0; row < unpenalised; row++) {
    for (let column = 0; column <= row; column++) factor[row * unpenalised + column] = equations.matrix[row * size + column];
  }
  return { factor, dropped: choleskyDropping(factor, unpenalised, known) };
}

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

/** Solves L X = B in place for a row-major B of `columns` columns. */
function forwardSolveMany(factor: Float64Array, size: number, block: Float64Array, columns: number): void {
  for (let row = 0; row < size; row++) {
    const start = row * columns;
    for (let k = 0; k < row; k++) {
      const weight = factor[row * size + k];
      if (weight === 0) continue;
      for (let column = 0; column < columns; column++) block[start + column] -= weight * block[k * columns + column];
    }
    const reciprocal = 1 / factor[row * size + row];
    for (let column = 0; column < columns; column++) block[start + column] *= reciprocal;
  }
}

function schurComplement(
  equations: NormalEquations, parts: { cross: Float64Array; solved: Float64Array; unpenalised: number; size: number },
): { matrix: Float64Array; vector: Float64Array } {
  const { cross, solved, unpenalised, size } = parts;
  const penalised = size - unpenalised;
  const matrix = new Float64Array(penalised * penalised);
  const vector = new Float64Array(penalised);
  for (let row = 0; row < penalised; row++) {
    const source = (unpenalised + row) * size + unpenalised;
    let value = equations.vector[unpenalised + row];
    for (let k = 0; k < unpenalised; k++) value -= cross[k * penalised + row] * solved[k];
    vector[row] = value;
    for (let column = 0; column <= row; column++) {
      let entry = equations.matrix[source + column];
      for (let k = 0; k < unpenalised; k++) entry -= cross[k * penalised + row] * cross[k * penalised + column];
      matrix[row * penalised + column] = entry;
      matrix[column * penalised + row] = entry;
    }
  }
  return { matrix, vector };
}
