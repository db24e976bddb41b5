import { basisRows, columnsOf } from "../basis/term-basis";
import { numberColumn, rowCount } from "../basis/columns";
import { addTransposeTimes, entriesPerRow, gatherRow } from "../linalg/sparse-rows";
import { withoutZeros } from "../linalg/packed-symmetric";
import type { SparseRows } from "../linalg/sparse-rows";
import type { FittedModel, ModelData } from "../types";
import { sparseVarianceOf } from "./model-covariance";

/** Rows of a model's design for any data, sparse per term, in the coordinates of `FittedModel.coefficients`. */
export type DesignRows = {
  count: number;
  offset: Float64Array;
  /** The intercept first, then the terms in the model's order. */
  parts: { id: string; first: number; rows: SparseRows }[];
};

/**
 * Builds a model's design rows for data, once for several uses. O(n x terms).
 *
 * @param data the columns of the model's terms (and its offset), equal lengths; the response is not needed.
 * @throws EngineError column-missing, length-mismatch, value-not-finite, value-not-positive, level-unknown.
 * @example const rows = designRows(model, { price: [1.49, 1.99] });
 */
export function designRows(model: FittedModel, data: ModelData): DesignRows {
  const { spec } = model;
  const columns: [string, string][] = spec.terms.flatMap((term) => columnsOf(term).map((name): [string, string] => [name, term.kind]));
  if (spec.offset !== undefined) columns.push([spec.offset, "offset"]);
  // A model of the intercept alone has as many rows as whatever is given.
  const count = columns.length > 0 ? rowCount(data, columns) : (Object.values(data)[0]?.length ?? 0);
  const intercept: SparseRows = { storage: "single", width: 1, values: new Float64Array(count).fill(1) };
  return {
    count,
    offset: spec.offset === undefined ? new Float64Array(count) : numberColumn(data, spec.offset, "offset"),
    parts: [
      { id: "intercept", first: 0, rows: intercept },
      ...model.terms.map((term) => ({ id: term.id, first: term.first, rows: basisRows(term.basis, data) })),
    ],
  };
}

/**
 * X'v: the gradient of sum_i v_i eta_i with respect to the coefficients, for the delta method. O(n x terms).
 *
 * @param vector one value per row. Not changed.
 * @returns one value per coefficient.
 * @example const gradient = transposeTimes(model, rows, weights); const variance = covarianceQuadratic(model, gradient, gradient);
 */
export function transposeTimes(model: FittedModel, rows: DesignRows, vector: Float64Array): Float64Array {
  const out = new Float64Array(model.coefficients.length);
  for (const part of rows.parts) addTransposeTimes(part.rows, vector, out, part.first);
  return out;
}

/**
 * X'v straight from data, as `transposeTimes`.
 *
 * @throws EngineError as `designRows`.
 * @example designTransposeTimes(model, { price: [1.49] }, Float64Array.of(1)); // the row itself
 */
export const designTransposeTimes = (model: FittedModel, data: ModelData, vector: Float64Array): Float64Array =>
  transposeTimes(model, designRows(model, data), vector);

/**
 * X'v for several vectors over the same rows, which are built once.
 *
 * @throws EngineError as `designRows`.
 * @example const [plan, base] = designTransposeTimesMany(model, data, [planned, baseline]);
 */
export function designTransposeTimesMany(model: FittedModel, data: ModelData, vectors: readonly Float64Array[]): Float64Array[] {
  const rows = designRows(model, data);
  return vectors.map((vector) => transposeTimes(model, rows, vector));
}

/**
 * Standard error of each row's linear predictor (or of the parts given). O(n x entries^2), entries about 4 a curve; with
 * groups O(n x shared coefficients^2).
 *
 * @param parts of `designRows` for the model (extended by the same data, where they hold new weeks or groups), `count` rows each.
 * @example rowStandardErrors(model, rows.parts, rows.count); // as predict(model, data).standardError
 */
export function rowStandardErrors(model: FittedModel, parts: DesignRows["parts"], count: number): Float64Array {
  const entries = parts.reduce((sum, part) => sum + entriesPerRow(part.rows), 0);
  const indices = new Int32Array(entries);
  const values = new Float64Array(entries);
  const errors = new Float64Array(count);
  const varianceOf = sparseVarianceOf(model);
  for (let row = 0; row < count; row++) {
    let used = 0;
    for (const part of parts) used = gatherRow(part.rows, row, part.first, { indices, values, count: used });
    errors[row] = Math.sqrt(varianceOf(indices, values, withoutZeros(indices, values, used)));
  }
  return errors;
}
