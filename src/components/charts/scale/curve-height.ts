import type { Scale } from "./scale";

/** A driver's curve as multipliers of demand at rising x. */
export type CurvePoint = { x: number; estimate: number; lower: number; upper: number };

/**
 * The curve's value at x as drawn: straight between points on the vertical scale, so that a dot placed by it
 * lies on the line to the pixel. Beyond the ends the end value holds.
 */
export const curveValueAt = (points: readonly CurvePoint[], x: number, kind: Scale["kind"] = "log"): CurvePoint => {
  const last = points.length - 1;
  if (x <= points[0].x) return { ...points[0], x };
  if (x >= points[last].x) return { ...points[last], x };
  let low = 0;
  let high = last;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (points[middle].x <= x) low = middle;
    else high = middle;
  }
  const [left, right] = [points[low], points[high]];
  const share = (x - left.x) / (right.x - left.x);
  const between = (a: number, b: number) =>
    kind === "log" && a > 0 && b > 0 ? Math.exp(Math.log(a) + share * Math.log(b / a)) : a + share * (b - a);
  return {
    x,
    estimate: between(left.estimate, right.estimate),
    lower: between(left.lower, right.lower),
    upper: between(left.upper, right.upper),
  };
};
