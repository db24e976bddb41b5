import type { LaneCurve } from "@shared/planning";
import type { CurvePoint } from "@/components/charts/scale/curve-height";

/** Where on the axis the curve is one: multipliers are read against the base. */
export function lanePoints(curve: LaneCurve, reference: number): CurvePoint[] {
  return Array.from<number | string, CurvePoint>(curve.x, (x, index) => ({
    x: Number(x),
    estimate: Math.exp(curve.estimate[index] - reference),
    lower: Math.exp(curve.lower[index] - reference),
    upper: Math.exp(curve.upper[index] - reference),
  }));
}

/** Evenly spaced values over an axis, ends included. */
export const axisValues = (min: number, max: number, count = 121): number[] =>
  Array.from({ length: count }, (_, index) => (index === count - 1 ? max : min + ((max - min) * index) / (count - 1)));

/** Weeks near each value as the hatching reads them: none where the stores hardly saw it. */
export const supportFor = (curve: LaneCurve): number[] =>
  Array.from(curve.supportCount, (count, index) => (curve.hardlySeen[index] === 1 ? 0 : Math.max(count, 5)));
