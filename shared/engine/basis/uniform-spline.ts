import type { SplineRows } from "../linalg/sparse-rows";

/**
 * Rows of cubic B-splines on equally spaced knots. With the position u = (x - lower) / step, interval i = floor(u) and
 * t = u - i, the four splines not zero there are (1-t)^3/6, (3t^3-6t^2+4)/6, (-3t^3+3t^2+3t+1)/6 and t^3/6.
 * Source: de Boor (1978), A Practical Guide to Splines, ch. X; Eilers & Marx (1996), section 2.
 */
type Grid = { lower: number; upper: number; intervals: number; wraps: boolean };

/** The values of the four splines at t within an interval, written at `at`. They sum to one. */
function writeValues(t: number, out: Float64Array, at: number): void {
  const s = 1 - t;
  const square = t * t;
  const cube = square * t;
  out[at] = (s * s * s) / 6;
  out[at + 1] = (3 * cube - 6 * square + 4) / 6;
  out[at + 2] = (-3 * cube + 3 * square + 3 * t + 1) / 6;
  out[at + 3] = cube / 6;
}

/** Their derivatives with respect to t. They sum to zero. */
function writeSlopes(t: number, out: Float64Array, at: number): void {
  const s = 1 - t;
  out[at] = (-s * s) / 2;
  out[at + 1] = (3 * t * t - 4 * t) / 2;
  out[at + 2] = (-3 * t * t + 2 * t + 1) / 2;
  out[at + 3] = (t * t) / 2;
}

/** Interval of the row: the nearest end's where x lies outside. */
function intervalOf(u: number, intervals: number): number {
  if (!(u > 0)) return 0;
  return u >= intervals ? intervals - 1 : Math.floor(u);
}

/** Position on the circle, in [0, intervals). */
function wrapPosition(u: number, intervals: number): number {
  const wrapped = u - intervals * Math.floor(u / intervals);
  return wrapped >= intervals ? 0 : wrapped;
}

/**
 * Spline values per row. Outside `lower` to `upper` each spline goes on as its tangent, so a curve goes on as a straight
 * line; on a circle x is wrapped round instead.
 *
 * @param x finite values, length n. Not changed.
 * @param grid the knots' ends, and how many intervals lie between: the basis has intervals + 3 columns (circle: intervals).
 * @returns four values a row (they sum to one) and the first one's column.
 * @example splineRows(Float64Array.of(0.5), { lower: 0, upper: 1, intervals: 1, wraps: false }).values; // 1/48, 23/48, 23/48, 1/48
 */
export function splineRows(x: Float64Array, grid: Grid): SplineRows {
  const { lower, upper, intervals, wraps } = grid;
  const scale = intervals / (upper - lower);
  const first = new Int32Array(x.length);
  const values = new Float64Array(4 * x.length);
  const slopes = new Float64Array(4);
  for (let row = 0; row < x.length; row++) {
    const raw = (x[row] - lower) * scale;
    const u = wraps ? wrapPosition(raw, intervals) : raw;
    const interval = intervalOf(u, intervals);
    const t = u - interval;
    first[row] = interval;
    if (t >= 0 && t <= 1) {
      writeValues(t, values, 4 * row);
    } else {
      const edge = t < 0 ? 0 : 1;
      writeValues(edge, values, 4 * row);
      writeSlopes(edge, slopes, 0);
      for (let k = 0; k < 4; k++) values[4 * row + k] += slopes[k] * (t - edge);
    }
  }
  return { storage: "spline", width: wraps ? intervals : intervals + 3, wraps, first, values };
}

/**
 * Derivatives of the splines with respect to x per row; constant outside the range.
 *
 * @param x finite values, length n. Not changed.
 * @returns rows as `splineRows` gives, with derivatives in place of values (they sum to zero).
 * @example splineSlopeRows(Float64Array.of(0), { lower: 0, upper: 1, intervals: 1, wraps: false }).values; // -0.5, 0, 0.5, 0
 */
export function splineSlopeRows(x: Float64Array, grid: Grid): SplineRows {
  const { lower, upper, intervals, wraps } = grid;
  const scale = intervals / (upper - lower);
  const first = new Int32Array(x.length);
  const values = new Float64Array(4 * x.length);
  for (let row = 0; row < x.length; row++) {
    const raw = (x[row] - lower) * scale;
    const u = wraps ? wrapPosition(raw, intervals) : raw;
    const interval = intervalOf(u, intervals);
    first[row] = interval;
    writeSlopes(Math.min(1, Math.max(0, u - interval)), values, 4 * row);
    for (let k = 0; k < 4; k++) values[4 * row + k] *= scale;
  }
  return { storage: "spline", width: wraps ? intervals : intervals + 3, wraps, first, values };
}
