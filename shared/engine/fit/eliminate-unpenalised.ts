import { forwardSolve, logDeterminant } from "../linalg/cholesky";
import { choleskyDropping } from "../linalg/dropping-cholesky";
import type { DroppedColumn } from "../linalg/dropping-cholesky";
import type { DenseSystem } from "./dense-system";
import type { NormalEquations } from "./normal-equations";

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

/** What elimination leaves of a diagonal entry, as a share of it, when nothing but rounding is left. */
const roundingShare = 1e-13;

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
  for (let k = 0; k < penalised; k++) {
    if (matrix[k * (penalised + 1)] < roundingShare * equations.matrix[(unpenalised + k) * (size + 1)]) clear({ matrix, vector }, k);
  }
  return { matrix, vector };
}

/** Of a coordinate that the unpenalised ones reproduce nothing is left: rounding would give it degrees of freedom below zero. */
function clear({ matrix, vector }: { matrix: Float64Array; vector: Float64Array }, coordinate: number): void {
  const size = vector.length;
  vector[coordinate] = 0;
  for (let k = 0; k < size; k++) {
    matrix[coordinate * size + k] = 0;
    matrix[k * size + coordinate] = 0;
  }
}
