import type { SplineRows } from "../linalg/sparse-rows";

/**
 * Cubic B-splines on knots of any spacing, the boundary knots counted four times: on m + 1 knots there are m + 3 of them,
 * and in interval i those from i to i + 3 are not zero.
 * Source: de Boor (1978), A Practical Guide to Splines, ch. X, recurrence (14) and derivatives (X.8).
 */

/** The knot `offset` places from the interval's own, the ends repeated. */
function knotAt(knots: Float64Array, position: number): number {
  return knots[Math.min(Math.max(position, 0), knots.length - 1)];
}

/** Interval that x lies in: the nearest end's outside the knots. O(log knots). */
function intervalOf(knots: Float64Array, x: number): number {
  let low = 0;
  let high = knots.length - 2;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (knots[middle] <= x) low = middle;
    else high = middle - 1;
  }
  return low;
}

/**
 * Writes the derivatives of an order (0: the values) of the four splines that are not zero in an interval.
 *
 * @param knots ascending, all different.
 * @param at.out receives four numbers from `at.start` on.
 * @example writeKnotSplines(knots, 0, { x: knots[0], order: 0, out, start: 0 }); // 1, 0, 0, 0
 */
export function writeKnotSplines(
  knots: Float64Array, interval: number, at: { x: number; order: 0 | 1 | 2; out: Float64Array; start: number },
): void {
  const { x, order, out, start } = at;
  out.fill(0, start, start + 4);
  out[start] = 1;
  for (let degree = 1; degree <= 3 - order; degree++) {
    let carried = 0;
    for (let k = 0; k < degree; k++) {
      const right = knotAt(knots, interval + k + 1);
      const left = knotAt(knots, interval + 1 - degree + k);
      const share = out[start + k] / (right - left);
      out[start + k] = carried + (right - x) * share;
      carried = (x - left) * share;
    }
    out[start + degree] = carried;
  }
  // Each differentiation raises the degree by one: b' = degree (b_j / (t_j+degree - t_j) - b_j+1 / (t_j+degree+1 - t_j+1)).
  for (let degree = 4 - order; degree <= 3; degree++) {
    for (let k = degree; k >= 0; k--) {
      const first = interval - degree + k;
      const above = k === 0 ? 0 : out[start + k - 1] / (knotAt(knots, first + degree) - knotAt(knots, first));
      const below = k === degree ? 0 : out[start + k] / (knotAt(knots, first + degree + 1) - knotAt(knots, first + 1));
      out[start + k] = degree * (above - below);
    }
  }
}

/**
 * Spline values per row; outside the knots each spline goes on as its tangent.
 *
 * @param x finite values, length n. Not changed.
 * @param knots ascending, all different, boundary knots once.
 * @returns four values a row (they sum to one) and the first one's column.
 * @example knotSplineRows(Float64Array.of(0.5), Float64Array.of(0, 1)).values; // 1/8, 3/8, 3/8, 1/8
 */
export function knotSplineRows(x: Float64Array, knots: Float64Array): SplineRows {
  const first = new Int32Array(x.length);
  const values = new Float64Array(4 * x.length);
  const slopes = new Float64Array(4);
  for (let row = 0; row < x.length; row++) {
    const interval = intervalOf(knots, x[row]);
    const inside = clampTo(knots, x[row]);
    first[row] = interval;
    writeKnotSplines(knots, interval, { x: inside, order: 0, out: values, start: 4 * row });
    if (inside === x[row]) continue;
    writeKnotSplines(knots, interval, { x: inside, order: 1, out: slopes, start: 0 });
    for (let k = 0; k < 4; k++) values[4 * row + k] += slopes[k] * (x[row] - inside);
  }
  return { storage: "spline", width: knots.length + 2, wraps: false, first, values };
}

const clampTo = (knots: Float64Array, x: number): number => Math.min(Math.max(x, knots[0]), knots[knots.length - 1]);

/**
 * Derivatives of the splines with respect to x per row; constant outside the knots.
 *
 * @param x finite values, length n. Not changed.
 * @returns rows as `knotSplineRows` gives, with derivatives in place of values (they sum to zero).
 * @example knotSplineSlopeRows(Float64Array.of(0), Float64Array.of(0, 1)).values; // -3, 3, 0, 0
 */
export function knotSplineSlopeRows(x: Float64Array, knots: Float64Array): SplineRows {
  const first = new Int32Array(x.length);
  const values = new Float64Array(4 * x.length);
  for (let row = 0; row < x.length; row++) {
    first[row] = intervalOf(knots, x[row]);
    writeKnotSplines(knots, first[row], { x: clampTo(knots, x[row]), order: 1, out: values, start: 4 * row });
  }
  return { storage: "spline", width: knots.length + 2, wraps: false, first, values };
}
