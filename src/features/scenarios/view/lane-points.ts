import type { LaneCurve } from "@shared/planning";
import type { CurvePoint } from "@/components/charts/scale/curve-height";

/** From the link scale to multipliers: of the base, where the curve is relative to it, else of an average week. */
export function lanePoints(curve: LaneCurve): CurvePoint[] {
  return Array.from<number | string, CurvePoint>(curve.x, (x, index) => ({
    x: Number(x),
    estimate: Math.exp(curve.estimate[index]),
    lower: Math.exp(curve.lower[index]),
    upper: Math.exp(curve.upper[index]),
  }));
}

/** Evenly spaced values over an axis, ends included. */
export const axisValues = (min: number, max: number, count = 121): number[] =>
  Array.from({ length: count }, (_, index) => (index === count - 1 ? max : min + ((max - min) * index) / (count - 1)));

/** Weeks near each value as the hatching reads them: none where the stores hardly saw it. */
export const supportFor = (curve: LaneCurve): number[] =>
  Array.from(curve.supportCount, (count, index) => (curve.hardlySeen[index] === 1 ? 0 : Math.max(count, 5)));
