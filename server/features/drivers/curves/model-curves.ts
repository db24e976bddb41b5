import type { Curve } from "@shared/contract/drivers";
import { termCurve, type FittedModel, type FittedTerm, type TermCurve } from "@shared/engine";
import { driverOfTerm, type Driver } from "@shared/planning";

/** A term's curve with what a page draws beside it. */
export type DriverCurve = {
  term: FittedTerm & { kind: Curve["kind"] };
  driver: Driver;
  curve: TermCurve;
  /** Every value seen, one entry a week, ascending; empty for levels. */
  seen: number[];
};

/** Whether a slope in the logarithm of a term's column is an own-price elasticity. */
export function isPriceTerm(model: FittedModel, term: FittedTerm): boolean {
  const isRatio = model.spec.family !== "gaussian" && model.spec.family !== "binomial";
  return isRatio && term.kind !== "factor" && term.kind !== "random-effect" && term.columns[0] === "price";
}

/** Whether a term is one curve over one column; surfaces and curves per group are drawn otherwise. */
export const hasOneCurve = (term: FittedTerm): term is FittedTerm & { kind: Curve["kind"] } =>
  term.kind !== "tensor-product" && term.kind !== "factor-smooth" && term.columns.length === 1;

/** Every term's curve over the values seen, with its band and, for price, its elasticities. */
export function modelCurves(model: FittedModel, { level, points }: { level: number; points: number }): DriverCurve[] {
  return model.terms.filter(hasOneCurve).map((term) => ({
    term,
    driver: driverOfTerm(term),
    curve: termCurve(model, term.id, { level, points, derivative: isPriceTerm(model, term) }),
    seen: seenWeekByWeek(term),
  }));
}

/** The values a term was learnt from, each as often as it was seen; empty for levels. */
export function seenWeekByWeek({ seen }: FittedTerm): number[] {
  const { values, counts } = seen;
  if (Array.isArray(values)) return [];
  return Array.from(values).flatMap((value, index) => new Array<number>(counts[index]).fill(value));
}
