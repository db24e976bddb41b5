import { normalQuantile, termCurve } from "../../engine";
import type { FittedTerm } from "../../engine";
import type { Driver } from "../driver";
import { varianceOfSum } from "../sum-over-stores";
import { membersOf } from "./lane-term";
import type { LaneMember, LaneStore } from "./lane-term";
import { partAt, storeLane } from "./store-lane";
import type { StoreLane } from "./store-lane";

/** One driver's curve for several stores together, on the link scale: exp() of it is a multiplier. */
export type LaneCurve = {
  driver: Driver;
  kind: FittedTerm["kind"];
  /** Values in the column's own unit, or level names. */
  x: Float64Array | string[];
  estimate: Float64Array;
  standardError: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  /** From the smallest to the largest value any of the stores saw; null for levels. */
  observedRange: [number, number] | null;
  /** Weeks seen near each x, the stores' mean weighted by base units. */
  supportCount: Float64Array;
  /** 1 where stores with at least half of the base units saw x in fewer than 5 weeks or not at all: hatched. */
  hardlySeen: Uint8Array;
  /** Stores whose model has no such driver: they take no part. */
  without: string[];
};

export type LaneCurveRequest = {
  stores: readonly LaneStore[];
  driver: Driver;
  /** Probability of the band, for example 0.8. */
  level: number;
  /** Evenly spaced values over what the stores saw (on the log scale for a log term); 101 unless given. */
  points?: number;
  /** Values to evaluate at instead; level names for a factor. */
  at?: readonly number[] | readonly string[];
  /** Of a driver of numbers: the value at which the multiplier is one, without doubt. Centred over the weeks seen unless given. */
  relativeTo?: number;
};

const DEFAULT_POINTS = 101;
const FEWEST_WEEKS_SEEN = 5;

/**
 * The curve a lane draws: the base-units-weighted mean of the selected stores' multipliers, ln(sum of w exp(f) / sum of w), as
 * their units add up; with a pointwise band by the delta method: each store's error counts by its share
 * w exp(f) / sum of w exp(f), and errors add up as `varianceOfSum` does. A level that a store never saw is averaged over the
 * stores that did. Relative to a value, it is ln(sum of w exp(f(x)) / sum of w exp(f(value))), in whose band what both share
 * cancels.
 *
 * @returns null where no selected store's model has the driver.
 * @throws EngineError for values a term cannot be evaluated at. Cost: stores x points.
 * @example laneCurve({ stores: [{ store: "S1", model, baseUnits: 420 }], driver: "price", level: 0.8 })?.x
 */
export function laneCurve({ stores, driver, level, points = DEFAULT_POINTS, at, relativeTo }: LaneCurveRequest): LaneCurve | null {
  const { members, without } = membersOf(stores, driver);
  if (members.length === 0) return null;
  const x = at === undefined ? valuesOf(members, points) : asValues(at);
  const sums = sumsOver(members.map((member) => storeLane(member, { x, relativeTo })), x.length);
  const standardError = sums.variance.map(Math.sqrt);
  const half = normalQuantile(level);
  const ranges = members.flatMap(({ term }) => (term.observedRange === null ? [] : [term.observedRange]));
  return {
    driver,
    kind: members[0].term.kind,
    x,
    estimate: sums.estimate,
    standardError,
    lower: sums.estimate.map((value, point) => value - half * standardError[point]),
    upper: sums.estimate.map((value, point) => value + half * standardError[point]),
    observedRange: unionOf(ranges),
    supportCount: sums.supportCount,
    hardlySeen: Uint8Array.from(sums.hardlySeen, (share) => (share >= 0.5 ? 1 : 0)),
    without,
  };
}

function unionOf(ranges: readonly [number, number][]): [number, number] | null {
  if (ranges.length === 0) return null;
  return [Math.min(...ranges.map(([from]) => from)), Math.max(...ranges.map(([, to]) => to))];
}

type Sums = Record<"estimate" | "variance" | "supportCount" | "hardlySeen", Float64Array>;

/** Means over stores, point by point. A store without a level leaves its weight for that level to the others. */
function sumsOver(lanes: readonly StoreLane[], count: number): Sums {
  const zeros = () => new Float64Array(count);
  const sums: Sums = { estimate: zeros(), variance: zeros(), supportCount: zeros(), hardlySeen: zeros() };
  const all = lanes.reduce((total, { baseUnits }) => total + baseUnits, 0);
  for (let point = 0; point < count; point++) {
    const having = lanes.filter(({ positions }) => positions[point] >= 0);
    const total = having.reduce((sum, { baseUnits }) => sum + baseUnits, 0);
    const unitsOf = ({ baseUnits, values, positions }: StoreLane) => baseUnits * Math.exp(values.estimate[positions[point]]);
    const referenceOf = ({ baseUnits, reference }: StoreLane) => baseUnits * Math.exp(reference?.estimate ?? 0);
    const units = having.reduce((sum, lane) => sum + unitsOf(lane), 0);
    const reference = having.reduce((sum, lane) => sum + referenceOf(lane), 0);
    sums.estimate[point] = Math.log(units / reference);
    sums.variance[point] = varianceOfSum(having.map((lane) =>
      partAt(lane, lane.positions[point], { share: unitsOf(lane) / units, referenceShare: referenceOf(lane) / reference })));
    sums.hardlySeen[point] = 1 - total / all;
    for (const { baseUnits, positions, values } of having) {
      const position = positions[point];
      sums.supportCount[point] += (baseUnits / all) * values.supportCount[position];
      const isHardlySeen = values.outside[position] === 1 || values.supportCount[position] < FEWEST_WEEKS_SEEN;
      if (isHardlySeen) sums.hardlySeen[point] += baseUnits / all;
    }
  }
  return sums;
}

function valuesOf(members: readonly LaneMember[], points: number): Float64Array | string[] {
  const [{ model, term }] = members;
  if (term.basis.kind === "factor") {
    const levels = members.flatMap(({ term: { basis } }) => (basis.kind === "factor" ? [basis.reference, ...basis.levels] : []));
    return [...new Set(levels)];
  }
  if (term.basis.kind === "cyclic-smooth" || members.length === 1) return asValues(termCurve(model, term.id, { points }).x);
  const ranges = members.flatMap((member) => member.term.observedRange ?? []);
  const isLog = members.some(({ term: { basis } }) => "log" in basis && basis.log);
  const [from, to] = [Math.min(...ranges), Math.max(...ranges)];
  return Float64Array.from({ length: points }, (_, point) => {
    const share = point / (points - 1);
    return isLog ? from * (to / from) ** share : from + (to - from) * share;
  });
}

function asValues(values: Float64Array | readonly number[] | readonly string[]): Float64Array | string[] {
  if (values instanceof Float64Array) return values;
  const names = values.filter((value) => typeof value === "string");
  return names.length > 0 ? names : Float64Array.from(values, Number);
}
