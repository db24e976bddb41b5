import type { Curve } from "@shared/contract/drivers";
import type { CurvePoint } from "@/components/charts/scale/curve-height";
import type { FactorLevel } from "@/components/charts/factor-lane/factor-level";
import { capitalised } from "@/lib/format/capitalised";

type NumberCurve = Curve & { x: number[] };
type LevelCurve = Curve & { x: string[] };

/** Kinds whose values are names, not numbers. */
const levelKinds = new Set<Curve["kind"]>(["factor", "random-effect"]);

export const isLevelCurve = (curve: Curve): curve is LevelCurve => levelKinds.has(curve.kind);
export const isNumberCurve = (curve: Curve): curve is NumberCurve => !levelKinds.has(curve.kind);

/** From the link scale to multipliers of an average week. */
export const curvePoints = (curve: NumberCurve): CurvePoint[] =>
  curve.x.map((x, index) => ({
    x,
    estimate: Math.exp(curve.estimate[index]),
    lower: Math.exp(curve.lower[index]),
    upper: Math.exp(curve.upper[index]),
  }));

/** A level's words: "multi_buy" is "Multi-buy". */
export const levelLabel = (level: string): string =>
  capitalised(level === "multi_buy" ? "multi-buy" : level.replaceAll("_", " "));

/** Levels people know come in their usual order, others by name after them. */
const usualOrder = ["none", "feature", "display", "both", "multi_buy", "coupon", "other"];

const byUsualOrder = (a: FactorLevel, b: FactorLevel): number => {
  const place = ({ value }: FactorLevel) =>
    usualOrder.includes(value) ? usualOrder.indexOf(value) : usualOrder.length;
  return place(a) - place(b) || a.label.localeCompare(b.label);
};

/** From the link scale to multipliers of a week at the reference level. */
export const factorLevels = (curve: LevelCurve): FactorLevel[] =>
  curve.x
    .map((value, index): FactorLevel => ({
      value,
      label: levelLabel(value),
      estimate: Math.exp(curve.estimate[index]),
      lower: Math.exp(curve.lower[index]),
      upper: Math.exp(curve.upper[index]),
      weeks: curve.supportCount[index],
    }))
    .sort(byUsualOrder);

/** The level the others are read against: the one whose multiplier is one without doubt. */
export const referenceLevel = (curve: LevelCurve): string => {
  const index = curve.standardError.findIndex((error, at) => error === 0 && curve.estimate[at] === 0);
  return curve.x[Math.max(0, index)];
};
