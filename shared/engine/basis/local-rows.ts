import type { DenseRows } from "../linalg/sparse-rows";
import type { LocalRegressionBasis } from "../types";

/** Distinct points of the window around x that have weight: from `start` to `end` (not included), and half its width. */
type Window = { start: number; end: number; reach: number };

/**
 * Rows of a local regression: row x holds the weights with which the pooled values at the distinct points make up the curve
 * at x. Around x the nearest `neighbours` rows set the reach h; point k has kernel weight (1 - (|x - x_k| / h)^3)^3 times
 * its own weight; a polynomial is fitted to them by weighted least squares and taken at x (Cleveland 1979). Where fewer
 * distinct points have weight than the polynomial has coefficients, its degree is lowered. Beyond the outermost points the
 * curve goes on as the line that touches the polynomial there.
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
  for (let row = 0; row < x.length; row++) {
    const inside = Math.min(Math.max(x[row], at[0]), at[width - 1]);
    const own = values.subarray(row * width, (row + 1) * width);
    const window = windowAt(basis, inside);
    slope.fill(0);
    writeLocal(basis, { x: inside, window, value: own, slope });
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
  for (let row = 0; row < x.length; row++) {
    const inside = Math.min(Math.max(x[row], at[0]), at[width - 1]);
    writeLocal(basis, { x: inside, window: windowAt(basis, inside), value, slope: values.subarray(row * width, (row + 1) * width) });
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

/**
 * Writes the polynomial's value and slope at x as combinations of the points, by polynomials orthogonal over the window
 * (Forsythe 1957): value_k = w_k sum_j p_j(0) p_j(u_k) / |p_j|^2 with u = (x_k - x) / h.
 */
function writeLocal(
  { at, weights, degree }: LocalRegressionBasis,
  to: { x: number; window: Window; value: Float64Array; slope: Float64Array },
): void {
  const { x, window: { start, end, reach }, value, slope } = to;
  const terms = Math.min(degree, end - start - 1);
  let total = 0;
  let first = 0;
  for (let k = start; k < end; k++) {
    const u = (at[k] - x) / reach;
    const weight = weights[k] * tricube(u);
    total += weight;
    first += weight * u;
  }
  const centre = first / total;
  const { norm, middle, drop } = momentsAbout(centre, { at, weights, x, start, end, reach });
  let square = 0;
  if (terms === 2) {
    for (let k = start; k < end; k++) {
      const u = (at[k] - x) / reach;
      square += weights[k] * tricube(u) * ((u - middle) * (u - centre) - drop) ** 2;
    }
  }
  for (let k = start; k < end; k++) {
    const u = (at[k] - x) / reach;
    const weight = weights[k] * tricube(u);
    value[k] = weight / total;
    slope[k] = 0;
    if (terms >= 1) {
      value[k] -= (weight * centre * (u - centre)) / norm;
      slope[k] = (weight * (u - centre)) / (norm * reach);
    }
    if (terms === 2) {
      const second = (u - middle) * (u - centre) - drop;
      value[k] += (weight * (middle * centre - drop) * second) / square;
      slope[k] -= (weight * (middle + centre) * second) / (square * reach);
    }
  }
}

/** Of p1 = u - centre: its squared norm, the mean of u under it (middle), and |p1|^2 / |p0|^2 (drop). */
function momentsAbout(
  centre: number,
  of: { at: Float64Array; weights: Float64Array; x: number; start: number; end: number; reach: number },
): { norm: number; middle: number; drop: number } {
  let total = 0;
  let norm = 0;
  let weighted = 0;
  for (let k = of.start; k < of.end; k++) {
    const u = (of.at[k] - of.x) / of.reach;
    const weight = of.weights[k] * tricube(u);
    const squared = weight * (u - centre) ** 2;
    total += weight;
    norm += squared;
    weighted += squared * u;
  }
  return { norm, middle: weighted / norm, drop: norm / total };
}

function tricube(u: number): number {
  const distance = Math.abs(u);
  if (distance >= 1) return 0;
  const rest = 1 - distance * distance * distance;
  return rest * rest * rest;
}
