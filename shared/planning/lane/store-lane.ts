import { curveDifference, termCurve } from "../../engine";
import type { TermCurve } from "../../engine";
import { curveWithKnown, withKnown } from "../sum-over-stores";
import type { PartVariance } from "../sum-over-stores";
import type { LaneMember } from "./lane-term";

/** One store's curve at the lane's values. */
export type StoreLane = {
  baseUnits: number;
  values: TermCurve;
  /** With the band it would have if penalties were known. */
  known: TermCurve;
  /** Where in the curve each of the lane's values stands; -1 where the term does not know it. */
  positions: number[];
  /** Contribution at the value the lane is relative to, and the errors of differences from there; null without one. */
  reference: { estimate: number; error: PartVariance; differences: PartVariance[] } | null;
};

/**
 * A store's curve at those of the values its term knows.
 *
 * @param relativeTo of a term of numbers; undefined: the curve as it is centred.
 * @throws EngineError as `termCurve`.
 * @example storeLane(member, { x: Float64Array.of(1.49, 1.79), relativeTo: 1.79 }).reference?.differences[1].all // 0
 */
export function storeLane(member: LaneMember, { x, relativeTo }: { x: Float64Array | string[]; relativeTo?: number }): StoreLane {
  const { model, term, baseUnits } = member;
  const { basis } = term;
  if (basis.kind !== "factor") {
    const { curve: values, known } = curveWithKnown(model, term.id, { at: x });
    const reference = relativeTo === undefined ? null : referenceOf(member, x, relativeTo);
    return { baseUnits, values, known, positions: [...x.keys()], reference };
  }
  const names = typeof x[0] === "string" ? (x as string[]) : [];
  const levels = names.filter((name) => basis.levels.includes(name));
  const { curve: values, known } = curveWithKnown(model, term.id, { at: levels });
  return { baseUnits, values, known, positions: names.map((name) => levels.indexOf(name)), reference: null };
}

function referenceOf({ model, term }: LaneMember, x: Float64Array | string[], from: number): StoreLane["reference"] {
  const { all, known } = withKnown(model, (own) => ({
    at: termCurve(own, term.id, { at: [from] }),
    differences: curveDifference(own, term.id, { at: x, from }).standardError,
  }));
  return {
    estimate: all.at.estimate[0],
    error: { all: all.at.standardError[0] ** 2, known: known.at.standardError[0] ** 2 },
    differences: Array.from(all.differences, (error, index) => ({ all: error ** 2, known: known.differences[index] ** 2 })),
  };
}

/**
 * The variance of a store's part of the lane at one value: of share x f(x), or of share x f(x) - referenceShare x f(reference),
 * whose covariance follows from the error of the difference.
 *
 * @example partAt(lane, 0, { share: 1, referenceShare: 1 }) // that of the difference
 */
export function partAt(
  { values, known, reference }: StoreLane, position: number, { share, referenceShare }: { share: number; referenceShare: number },
): PartVariance {
  const own = { all: values.standardError[position] ** 2, known: known.standardError[position] ** 2 };
  const of = (kind: "all" | "known") => {
    if (reference === null) return share ** 2 * own[kind];
    const apart = (share - referenceShare) * (share * own[kind] - referenceShare * reference.error[kind]);
    return Math.max(0, apart + share * referenceShare * reference.differences[position][kind]);
  };
  return { all: of("all"), known: of("known") };
}
