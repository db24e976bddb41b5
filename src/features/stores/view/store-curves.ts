import type { Comparison } from "@shared/contract/comparisons";
import type { Curve } from "@shared/contract/drivers";
import type { OverlayCurve } from "@/components/charts/curve-overlay/curve-overlay";
import type { CurvePoint } from "@/components/charts/scale/curve-height";
import type { StoreGroup } from "@/components/charts/parts/group-shape";

export type ComparedStore = Comparison["stores"][number];
export type LearntStore = ComparedStore & { curve: Curve };

export const isLearnt = (store: ComparedStore): store is LearntStore => store.curve !== null;

/** From the link scale to multipliers. */
export const curvePoints = ({
  x,
  estimate,
  lower,
  upper,
}: Pick<Curve, "x" | "estimate" | "lower" | "upper">): CurvePoint[] =>
  x.map((value, index) => ({
    x: Number(value),
    estimate: Math.exp(estimate[index]),
    lower: Math.exp(lower[index]),
    upper: Math.exp(upper[index]),
  }));

export const storeCurve = (store: LearntStore, group: StoreGroup): OverlayCurve => ({
  id: store.store,
  name: store.name,
  group,
  points: curvePoints(store.curve),
  // Round the year every week is within range.
  range: store.curve.kind === "cyclic-smooth" ? null : store.curve.observedRange,
});

/** The chain has no band here: its line is the stores' weighted mean. */
export const chainCurve = (chain: NonNullable<Comparison["chain"]>): OverlayCurve => ({
  id: "chain",
  name: "Chain",
  points: curvePoints({ x: chain.x, estimate: chain.estimate, lower: chain.estimate, upper: chain.estimate }),
  range: null,
});
