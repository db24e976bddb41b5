import { paddedWidth } from "./sparse-rows";
import type { GroupedRows, IndexRows as Index, SingleRows as Single, SplineRows as Spline } from "./sparse-rows";

/** Rows that have a kernel of their own. */
export type PlainRows = Single | Index | Spline;

/**
 * Adds X_left' diag(weights) X_right over the padded columns, by the kernel for the pair of storages.
 *
 * @param left must not rank after `right` in the order single, index, spline; an index's values are among the weights already.
 * @param out left's padded width x right's, row-major.
 * @example crossKernel(index, spline, weights, out);
 */
export function crossKernel(left: PlainRows, right: PlainRows, weights: Float64Array, out: Float64Array): void {
  if (left.storage === "single") crossSingle(left, right, weights, out);
  else if (left.storage === "index") crossIndex(left, right as Index | Spline, weights, out);
  else if (left === right) squareSpline(left, weights, out);
  else crossSplines({ rows: left, width: left.width }, { rows: right as Spline, width: paddedWidth(right) }, weights, out);
}

function crossSingle(left: Single, right: Single | Index | Spline, weights: Float64Array, out: Float64Array): void {
  const count = weights.length;
  const own = left.values;
  if (right.storage === "single") {
    let sum = 0;
    for (let row = 0; row < count; row++) sum += weights[row] * own[row] * right.values[row];
    out[0] = sum;
  } else if (right.storage === "index") {
    for (let row = 0; row < count; row++) out[right.index[row]] += weights[row] * own[row];
  } else {
    const { first, values } = right;
    for (let row = 0; row < count; row++) {
      const scaled = weights[row] * own[row];
      const at = 4 * row;
      const from = first[row];
      out[from] += scaled * values[at];
      out[from + 1] += scaled * values[at + 1];
      out[from + 2] += scaled * values[at + 2];
      out[from + 3] += scaled * values[at + 3];
    }
  }
}

function crossIndex(left: Index, right: Index | Spline, weights: Float64Array, out: Float64Array): void {
  const count = weights.length;
  const own = left.index;
  if (right.storage === "index") {
    const { index, width } = right;
    for (let row = 0; row < count; row++) out[own[row] * width + index[row]] += weights[row];
  } else if (right.alike !== undefined) {
    const { codes, rows: { first, values } } = right.alike;
    const stride = paddedWidth(right);
    for (let row = 0; row < count; row++) {
      const weight = weights[row];
      const code = codes[row];
      const at = 4 * code;
      const from = own[row] * stride + first[code];
      out[from] += weight * values[at];
      out[from + 1] += weight * values[at + 1];
      out[from + 2] += weight * values[at + 2];
      out[from + 3] += weight * values[at + 3];
    }
  } else {
    const { first, values } = right;
    const stride = paddedWidth(right);
    for (let row = 0; row < count; row++) {
      const weight = weights[row];
      const at = 4 * row;
      const from = own[row] * stride + first[row];
      out[from] += weight * values[at];
      out[from + 1] += weight * values[at + 1];
      out[from + 2] += weight * values[at + 2];
      out[from + 3] += weight * values[at + 3];
    }
  }
}

/**
 * Diagonal blocks X_g' diag(weights) X_g of two splines.
 *
 * @param left both terms' rows are in the same group. right likewise; on a circle, one group of the padded width.
 * @param out added to: left.width x right.width values a group, row-major.
 * @example crossSplines({ rows: price, width: price.width }, { rows: season, width: paddedWidth(season) }, weights, out);
 */
export function crossSplines(left: GroupedRows<Spline>, right: GroupedRows<Spline>, weights: Float64Array, out: Float64Array): void {
  const { width } = left;
  const isOneGroup = left.rows.width === width;
  const stride = right.width;
  const { first, values: own } = left.rows;
  const { first: otherFirst, values: other } = right.rows;
  for (let row = 0; row < weights.length; row++) {
    const at = 4 * row;
    const r0 = other[at];
    const r1 = other[at + 1];
    const r2 = other[at + 2];
    const r3 = other[at + 3];
    const from = first[row];
    const group = isOneGroup ? 0 : (from / width) | 0;
    let to = (from - group) * stride + otherFirst[row];
    for (let k = 0; k < 4; k++, to += stride) {
      const scaled = weights[row] * own[at + k];
      out[to] += scaled * r0;
      out[to + 1] += scaled * r1;
      out[to + 2] += scaled * r2;
      out[to + 3] += scaled * r3;
    }
  }
}

/** A spline with itself: the upper triangle only, mirrored at the end. */
function squareSpline(rows: Spline, weights: Float64Array, out: Float64Array): void {
  const stride = paddedWidth(rows);
  const { first, values } = rows;
  for (let row = 0; row < weights.length; row++) {
    const weight = weights[row];
    const at = 4 * row;
    const v0 = values[at];
    const v1 = values[at + 1];
    const v2 = values[at + 2];
    const v3 = values[at + 3];
    const to = first[row] * (stride + 1);
    const w0 = weight * v0;
    const w1 = weight * v1;
    const w2 = weight * v2;
    out[to] += w0 * v0;
    out[to + 1] += w0 * v1;
    out[to + 2] += w0 * v2;
    out[to + 3] += w0 * v3;
    out[to + stride + 1] += w1 * v1;
    out[to + stride + 2] += w1 * v2;
    out[to + stride + 3] += w1 * v3;
    out[to + 2 * stride + 2] += w2 * v2;
    out[to + 2 * stride + 3] += w2 * v3;
    out[to + 3 * stride + 3] += weight * v3 * v3;
  }
  for (let row = 0; row < stride; row++) {
    for (let column = 0; column < row; column++) out[row * stride + column] = out[column * stride + row];
  }
}
