/**
 * The columns of one term, kept per row only where they are not zero.
 * single: one column, one value a row. index: `width` columns, the row's only one is `index[row]`, its value `values[row]`
 * (1 where `values` is null). spline: four neighbouring columns a row, `first[row]` to `first[row] + 3`, their values at
 * 4 x row; on a circle (`wraps`) column `width + k` is column k. dense: `width` values a row. tensor: products of two
 * splines, column (left column) x right.width + (right column). The n x p matrix these stand for is never formed.
 */
export type SparseRows = SingleRows | IndexRows | SplineRows | DenseRows | TensorRows;

export type SingleRows = { storage: "single"; width: 1; values: Float64Array };
export type IndexRows = { storage: "index"; width: number; index: Int32Array; values: Float64Array | null };
export type SplineRows = { storage: "spline"; width: number; wraps: boolean; first: Int32Array; values: Float64Array };
export type DenseRows = { storage: "dense"; width: number; values: Float64Array };
export type TensorRows = { storage: "tensor"; width: number; left: SplineRows; right: SplineRows };

/** Columns a kernel writes before the circle is closed. */
export const paddedWidth = (rows: SparseRows): number => (rows.storage === "spline" && rows.wraps ? rows.width + 3 : rows.width);

/**
 * out[row] += (the term's row) . coefficients[first ...]. O(n).
 *
 * @example addRowsTimes(rows, model.coefficients, term.first, linearPredictor);
 */
export function addRowsTimes(rows: SparseRows, coefficients: Float64Array, first: number, out: Float64Array): void {
  const count = out.length;
  if (rows.storage === "single") {
    const slope = coefficients[first];
    for (let row = 0; row < count; row++) out[row] += rows.values[row] * slope;
  } else if (rows.storage === "index") {
    for (let row = 0; row < count; row++) out[row] += coefficients[first + rows.index[row]];
  } else {
    addSplineTimes(rows, coefficients, first, out);
  }
}

function addSplineTimes(
  rows: Extract<SparseRows, { storage: "spline" }>, coefficients: Float64Array, first: number, out: Float64Array,
): void {
  const unwrapped = unwrap(coefficients.subarray(first, first + rows.width), rows.wraps);
  const { values } = rows;
  for (let row = 0; row < out.length; row++) {
    const from = rows.first[row];
    const at = 4 * row;
    out[row] += values[at] * unwrapped[from] + values[at + 1] * unwrapped[from + 1]
      + values[at + 2] * unwrapped[from + 2] + values[at + 3] * unwrapped[from + 3];
  }
}

/** On a circle the first three coefficients once more at the end, so that rows need no modulo. */
function unwrap(coefficients: Float64Array, wraps: boolean): Float64Array {
  if (!wraps) return coefficients;
  const padded = new Float64Array(coefficients.length + 3);
  padded.set(coefficients);
  padded.set(coefficients.subarray(0, 3), coefficients.length);
  return padded;
}

/**
 * out[first ...] += X_term' vector. O(n).
 *
 * @example addTransposeTimes(rows, residuals, gradient, term.first);
 */
export function addTransposeTimes(rows: SparseRows, vector: Float64Array, out: Float64Array, first: number): void {
  const count = vector.length;
  if (rows.storage === "single") {
    let sum = 0;
    for (let row = 0; row < count; row++) sum += rows.values[row] * vector[row];
    out[first] += sum;
  } else if (rows.storage === "index") {
    for (let row = 0; row < count; row++) out[first + rows.index[row]] += vector[row];
  } else {
    const { width, wraps, values } = rows;
    for (let row = 0; row < count; row++) {
      for (let k = 0; k < 4; k++) {
        const column = rows.first[row] + k;
        out[first + (wraps && column >= width ? column - width : column)] += values[4 * row + k] * vector[row];
      }
    }
  }
}

/**
 * Writes one row's non-zero entries as (coefficient index, value) pairs.
 *
 * @returns how many entries `indices` and `values` hold after this term's were added at `count`.
 * @example let count = 0; for (const term of terms) count = gatherRow(term.rows, row, term.first, { indices, values, count });
 */
export function gatherRow(
  rows: SparseRows, row: number, first: number, into: { indices: Int32Array; values: Float64Array; count: number },
): number {
  const { indices, values } = into;
  let { count } = into;
  if (rows.storage === "single") {
    indices[count] = first;
    values[count++] = rows.values[row];
  } else if (rows.storage === "index") {
    indices[count] = first + rows.index[row];
    values[count++] = 1;
  } else {
    for (let k = 0; k < 4; k++) {
      const column = rows.first[row] + k;
      indices[count] = first + (rows.wraps && column >= rows.width ? column - rows.width : column);
      values[count++] = rows.values[4 * row + k];
    }
  }
  return count;
}
