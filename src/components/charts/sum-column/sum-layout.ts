import type { DriverColour } from "../drivers";
import { linearScale } from "../scale/scale";
import type { Scale } from "../scale/scale";

/** A level stands on zero (base, plan); a step starts where the one before ended. */
export type SumPart = {
  id: string;
  label: string;
  kind: "level" | "step" | "total";
  units: number;
  driver?: DriverColour;
};

export type SumBar = SumPart & {
  left: number;
  width: number;
  /** Pixels; top is the smaller. */
  top: number;
  bottom: number;
  /** Where the running sum stands after this part. */
  endY: number;
};

/** Running sums before and after each part; levels and totals set the sum to their own value. */
export const runningSums = (parts: readonly SumPart[]): { from: number; to: number }[] => {
  let sum = 0;
  return parts.map((part) => {
    const from = part.kind === "step" ? sum : 0;
    sum = part.kind === "step" ? sum + part.units : part.units;
    return { from, to: sum };
  });
};

type SumScaleOptions = {
  parts: readonly SumPart[];
  interval?: { lower: number; upper: number };
  range: readonly [number, number];
};

/** Zero is always on the axis: bars are read by their length. */
export const sumScale = ({ parts, interval, range }: SumScaleOptions): Scale => {
  const ends = runningSums(parts).flatMap(({ from, to }) => [from, to]);
  const values = [...ends, 0, ...(interval ? [interval.lower, interval.upper] : [])];
  const low = Math.min(...values);
  const high = Math.max(...values, low + 1);
  return linearScale({ domain: [low, high + (high - low) * 0.04], range });
};

type SumBarsOptions = { parts: readonly SumPart[]; y: Scale; left: number; right: number };

/** Bars side by side over the width given, a third of each place left free. */
export const sumBars = ({ parts, y, left, right }: SumBarsOptions): SumBar[] => {
  const place = (right - left) / Math.max(1, parts.length);
  const width = Math.min(52, place * 0.7);
  return runningSums(parts).map(({ from, to }, index) => ({
    ...parts[index],
    left: left + place * (index + 0.5) - width / 2,
    width,
    top: y.toPixel(Math.max(from, to)),
    bottom: y.toPixel(Math.min(from, to)),
    endY: y.toPixel(to),
  }));
};
