import type { DenseRows } from "../linalg/sparse-rows";
import type { LocalRegressionBasis } from "../types";
import { roomForWindow, writeLocal } from "./local-polynomial";
import type { Window } from "./local-polynomial";

/**
 * Rows of a local regression: row x holds the weights with which the pooled values at the distinct points make up the curve
 * at x. Around x the nearest `neighbours` rows set the reach h; point k has kernel weight (1 - (|x - x_k| / h)^3)^3 times
 * its own weight; a polynomial is fitted to them by weighted least squares and taken at x (Cleveland 1979). Where fewer
 * distinct points have weight than the polynomial has coefficients, or rounding leaves it too few digits to tell them apart,
 * its degree is lowered. Beyond the outermost points the curve goes on as the line that touches the polynomial there.
 *
 * @param x finite values on the fitting scale, length n. Not changed.
 * @returns n x (distinct points); rows sum to one.
 * Cost: O(n x distinct points).
 * @example localRows(basis, Float64Array.of(1.5)).values; // one weight per distinct point
 */
export function localRows(basis: LocalRegressionBasis, x: Float64Array): DenseRows {
  const { at } = basis;
  const width = at.length;
  const values = new Float64Array(x.length * width);
  const slope = new Float64Array(width);
  const room = roomForWindow(width);
  for (let row = 0; row < x.length; row++) {
    const inside = Math.min(Math.max(x[row], at[0]), at[width - 1]);
    const own = values.subarray(row * width, (row + 1) * width);
    const window = windowAt(basis, inside);
    slope.fill(0);
    writeLocal(basis, { x: inside, window, value: own, slope, room });
    if (inside !== x[row]) for (let k = window.start; k < window.end; k++) own[k] += slope[k] * (x[row] - inside);
  }
  return { storage: "dense", width, values };
}

/**
 * Rows of the slope of the local polynomial at x, the usual estimate of the curve's derivative; at and beyond the ends the
 * line's own slope. They sum to zero; all zero for degree 0.
 *
 * @example localSlopeRows(basis, Float64Array.of(1.5)).values;
 */
export function localSlopeRows(basis: LocalRegressionBasis, x: Float64Array): DenseRows {
  const { at } = basis;
  const width = at.length;
  const values = new Float64Array(x.length * width);
  const value = new Float64Array(width);
  const room = roomForWindow(width);
  for (let row = 0; row < x.length; row++) {
    const inside = Math.min(Math.max(x[row], at[0]), at[width - 1]);
    writeLocal(basis, { x: inside, window: windowAt(basis, inside), value, slope: values.subarray(row * width, (row + 1) * width), room });
  }
  return { storage: "dense", width, values };
}

/**
 * The window around x: h is the distance of the `neighbours`-th nearest row, points nearer than h have weight.
 *
 * @returns reach 0 where so many rows share the value x itself.
 * @example windowAt(basis, 1.5).reach;
 */
export function windowAt({ at, rows, neighbours }: LocalRegressionBasis, x: number): Window {
  let end = firstAtLeast(at, x);
  let start = end;
  let counted = 0;
  let reach = 0;
  while (counted < neighbours && (start > 0 || end < at.length)) {
    const below = start > 0 ? x - at[start - 1] : Infinity;
    const above = end < at.length ? at[end] - x : Infinity;
    reach = Math.min(below, above);
    counted += below < above ? rows[--start] : rows[end++];
  }
  while (start < end && x - at[start] >= reach) start++;
  while (end > start && at[end - 1] - x >= reach) end--;
  return { start, end, reach };
}

function firstAtLeast(ascending: Float64Array, x: number): number {
  let low = 0;
  let high = ascending.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (ascending[middle] < x) low = middle + 1;
    else high = middle;
  }
  return low;
}
