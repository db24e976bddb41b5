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
export type SplineRows = { storage: "spline"; width: number; wraps: boolean; first: Int32Array; values: Float64Array; alike?: AlikeRows };
/** Where many rows are alike, each distinct one once, and per row which it is. */
export type AlikeRows = { codes: Int32Array; rows: SplineRows };
export type DenseRows = { storage: "dense"; width: number; values: Float64Array };
export type TensorRows = { storage: "tensor"; width: number; left: SplineRows; right: SplineRows };

/** A term on groups: column of group g is g x width + k. All columns of a term are one group of its width. */
export type GroupedRows<Rows extends SparseRows = SparseRows> = { rows: Rows; width: number };

/** Columns a kernel writes before the circle is closed. */
export const paddedWidth = (rows: SparseRows): number => (rows.storage === "spline" && rows.wraps ? rows.width + 3 : rows.width);

/**
 * How many entries `gatherRow` writes for a row.
 *
 * @example entriesPerRow({ storage: "single", width: 1, values }); // 1
 */
export function entriesPerRow(rows: SparseRows): number {
  switch (rows.storage) {
    case "single":
    case "index": return 1;
    case "spline": return 4;
    case "dense": return rows.width;
    case "tensor": return 16;
  }
}

/**
 * out[row] += (the term's row) . coefficients[first ...]. O(n x entries per row).
 *
 * @example addRowsTimes(rows, model.coefficients, term.first, linearPredictor);
 */
export function addRowsTimes(rows: SparseRows, coefficients: Float64Array, first: number, out: Float64Array): void {
  const count = out.length;
  if (rows.storage === "single") {
    const slope = coefficients[first];
    for (let row = 0; row < count; row++) out[row] += rows.values[row] * slope;
  } else if (rows.storage === "index") {
    const { index, values } = rows;
    if (values === null) for (let row = 0; row < count; row++) out[row] += coefficients[first + index[row]];
    else for (let row = 0; row < count; row++) out[row] += values[row] * coefficients[first + index[row]];
  } else if (rows.storage === "spline") {
    addSplineTimes(rows, coefficients, first, out);
  } else if (rows.storage === "dense") {
    const { width, values } = rows;
    for (let row = 0, at = 0; row < count; row++) {
      for (let k = 0; k < width; k++) out[row] += values[at++] * coefficients[first + k];
    }
  } else {
    addTensorTimes(rows, coefficients, first, out);
  }
}

function addSplineTimes(rows: SplineRows, coefficients: Float64Array, first: number, out: Float64Array): void {
  if (rows.alike !== undefined) {
    const { codes, rows: distinct } = rows.alike;
    const products = new Float64Array(distinct.first.length);
    addSplineTimes(distinct, coefficients, first, products);
    for (let row = 0; row < out.length; row++) out[row] += products[codes[row]];
    return;
  }
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

function addTensorTimes({ left, right }: TensorRows, coefficients: Float64Array, first: number, out: Float64Array): void {
  for (let row = 0; row < out.length; row++) {
    for (let k = 0; k < 4; k++) {
      const at = first + columnOf(left, row, k) * right.width;
      let sum = 0;
      for (let m = 0; m < 4; m++) sum += right.values[4 * row + m] * coefficients[at + columnOf(right, row, m)];
      out[row] += left.values[4 * row + k] * sum;
    }
  }
}

/** Column of a row's k-th spline. */
function columnOf({ first, width, wraps }: SplineRows, row: number, k: number): number {
  const column = first[row] + k;
  return wraps && column >= width ? column - width : column;
}

/**
 * out[first ...] += X_term' vector. O(n x entries per row).
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
    const { index, values } = rows;
    if (values === null) for (let row = 0; row < count; row++) out[first + index[row]] += vector[row];
    else for (let row = 0; row < count; row++) out[first + index[row]] += values[row] * vector[row];
  } else if (rows.storage === "spline") {
    addSplineTranspose(rows, vector, out, first);
  } else if (rows.storage === "dense") {
    const { width, values } = rows;
    for (let row = 0, at = 0; row < count; row++) {
      for (let k = 0; k < width; k++) out[first + k] += values[at++] * vector[row];
    }
  } else {
    addTensorTranspose(rows, vector, out, first);
  }
}

/** Summed over the padded columns first, so that no row asks for the circle. */
function addSplineTranspose(rows: SplineRows, vector: Float64Array, out: Float64Array, first: number): void {
  if (rows.alike !== undefined) {
    const { codes, rows: distinct } = rows.alike;
    const totals = new Float64Array(distinct.first.length);
    for (let row = 0; row < codes.length; row++) totals[codes[row]] += vector[row];
    addSplineTranspose(distinct, totals, out, first);
    return;
  }
  const { width, values, first: columns } = rows;
  const sums = new Float64Array(width + 3);
  for (let row = 0, at = 0; row < vector.length; row++, at += 4) {
    const weight = vector[row];
    const to = columns[row];
    sums[to] += values[at] * weight;
    sums[to + 1] += values[at + 1] * weight;
    sums[to + 2] += values[at + 2] * weight;
    sums[to + 3] += values[at + 3] * weight;
  }
  for (let k = 0; k < width; k++) out[first + k] += sums[k];
  if (rows.wraps) for (let k = 0; k < 3; k++) out[first + k] += sums[width + k];
}

function addTensorTranspose({ left, right }: TensorRows, vector: Float64Array, out: Float64Array, first: number): void {
  for (let row = 0; row < vector.length; row++) {
    for (let k = 0; k < 4; k++) {
      const at = first + columnOf(left, row, k) * right.width;
      const scaled = left.values[4 * row + k] * vector[row];
      for (let m = 0; m < 4; m++) out[at + columnOf(right, row, m)] += right.values[4 * row + m] * scaled;
    }
  }
}

/** What `gatherRow` writes to: (column, value) pairs, `count` of them so far. */
export type RowEntries = { indices: Int32Array; values: Float64Array; count: number };

/** Room for one row's entries. */
export function roomForRow(rows: SparseRows): RowEntries {
  const entries = entriesPerRow(rows);
  return { indices: new Int32Array(entries), values: new Float64Array(entries), count: 0 };
}

/**
 * Writes one row's entries as (coefficient index, value) pairs: `entriesPerRow` of them.
 *
 * @returns how many entries `indices` and `values` hold after this term's were added at `count`.
 * @example let count = 0; for (const term of terms) count = gatherRow(term.rows, row, term.first, { indices, values, count });
 */
export function gatherRow(rows: SparseRows, row: number, first: number, into: RowEntries): number {
  const { indices, values } = into;
  let { count } = into;
  if (rows.storage === "single") {
    indices[count] = first;
    values[count++] = rows.values[row];
  } else if (rows.storage === "index") {
    indices[count] = first + rows.index[row];
    values[count++] = rows.values === null ? 1 : rows.values[row];
  } else if (rows.storage === "spline") {
    for (let k = 0; k < 4; k++) {
      indices[count] = first + columnOf(rows, row, k);
      values[count++] = rows.values[4 * row + k];
    }
  } else if (rows.storage === "dense") {
    for (let k = 0; k < rows.width; k++) {
      indices[count] = first + k;
      values[count++] = rows.values[row * rows.width + k];
    }
  } else {
    const { left, right } = rows;
    for (let k = 0; k < 16; k++) {
      indices[count] = first + columnOf(left, row, k >> 2) * right.width + columnOf(right, row, k & 3);
      values[count++] = left.values[4 * row + (k >> 2)] * right.values[4 * row + (k & 3)];
    }
  }
  return count;
}
