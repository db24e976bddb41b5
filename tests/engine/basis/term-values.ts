import { basisRows, learnBasis } from "@shared/engine/basis/term-basis";
import type { LearntBasis } from "@shared/engine/basis/basis-kind";
import type { FittedTerm, ModelData, TermBasis, TermSpec } from "@shared/engine";
import { addRowsTimes } from "@shared/engine/linalg/sparse-rows";
import type { SparseRows } from "@shared/engine/linalg/sparse-rows";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import type { TermTransform } from "@shared/engine/penalty/term-transform";
import { seededNormal, seededUniform } from "../support/generator";

/** Rows with a price, a temperature, a week, a store and a promotion; the same for the same seed. */
export function driverRows(seed: number, count = 60) {
  const uniform = seededUniform(seed);
  const normal = seededNormal(seed + 1);
  const price = Array.from({ length: count }, () => Math.round(100 * (1 + 2 * uniform())) / 100);
  const temperature = price.map(() => 12 + 6 * normal());
  const week = price.map((_, row) => 20 + Math.floor((row * 30) / count) + (row > count / 2 ? 4 : 0));
  const store = price.map((_, row) => `s${row % 4}`);
  const promotion = price.map(() => (uniform() < 0.3 ? "feature" : "none"));
  return { price, temperature, week, store, promotion };
}

/** A learnt basis of the kind expected. */
export function learn<Kind extends TermBasis["kind"]>(
  kind: Kind, term: TermSpec, data: ModelData,
): LearntBasis<TermBasis> & { basis: Extract<TermBasis, { kind: Kind }> } {
  const learnt = learnBasis(term, data);
  if (learnt.basis.kind !== kind) throw new Error(`learnt ${learnt.basis.kind}, not ${kind}`);
  return learnt as LearntBasis<TermBasis> & { basis: Extract<TermBasis, { kind: Kind }> };
}

/** Value of each row for given coefficients. */
export function valuesOf(rows: SparseRows, coefficients: ArrayLike<number>, count: number): Float64Array {
  const out = new Float64Array(count);
  addRowsTimes(rows, Float64Array.from(coefficients), 0, out);
  return out;
}

/** The curve of given coefficients at data. */
export const curveAt = (basis: TermBasis, coefficients: ArrayLike<number>, data: ModelData, count: number): Float64Array =>
  valuesOf(basisRows(basis, data), coefficients, count);

/** Random coefficients; the same for the same seed. */
export function someCoefficients(count: number, seed = 11): Float64Array {
  const normal = seededNormal(seed);
  return Float64Array.from({ length: count }, normal);
}

/** The matrix of a transform, row-major raw width x coordinates, its columns in the order of the transform. */
export function transformMatrix(transform: TermTransform, rawWidth: number): { matrix: Float64Array; width: number } {
  if (transform.form === "dense") return { matrix: transform.matrix, width: transform.matrix.length / rawWidth };
  if (transform.form === "scaled") return { matrix: Float64Array.of(transform.factor), width: 1 };
  if (transform.form === "without") {
    const matrix = new Float64Array(rawWidth * (rawWidth - 1));
    for (let raw = 0, column = 0; raw < rawWidth; raw++) if (raw !== transform.leftOut) matrix[raw * (rawWidth - 1) + column++] = 1;
    return { matrix, width: rawWidth - 1 };
  }
  const { rows, columns, count } = transform;
  const width = columns * count;
  const matrix = new Float64Array(rows * count * width);
  for (let level = 0; level < count; level++) {
    for (let i = 0; i < rows; i++) {
      for (let j = 0; j < columns; j++) matrix[(level * rows + i) * width + level * columns + j] = transform.matrix[i * columns + j];
    }
  }
  return { matrix, width };
}

/** Raw coefficients of one coordinate alone. */
export function coordinateCurve(basis: TermBasis, coordinate: number): Float64Array {
  const { transform, rawWidth } = termCoordinates(basis);
  const { matrix, width } = transformMatrix(transform, rawWidth);
  return Float64Array.from({ length: rawWidth }, (_, raw) => matrix[raw * width + coordinate]);
}

/** A fitted term as far as curves and support counts read it. */
export function fittedTerm(spec: TermSpec, data: ModelData, columns: string[]): FittedTerm {
  const { basis, seen, observedRange } = learnBasis(spec, data);
  return {
    id: columns.join(":"), kind: spec.kind, columns, first: 0, count: 0, edf: 0, penalties: [], basis, observedRange, seen,
    layout: { unpenalisedFirst: 0, penalisedFirst: 0, groupFirst: null },
  };
}
