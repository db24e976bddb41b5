import { termCurve, type FittedModel, type FittedTerm, type TermCurve } from "@shared/engine";
import { driverOfTerm, type Driver } from "@shared/planning";

/** A term's curve with what a page draws beside it. */
export type DriverCurve = {
  term: FittedTerm;
  driver: Driver;
  curve: TermCurve;
  /** Every value seen, one entry a week, ascending; empty for levels. */
  seen: number[];
};

/** Whether a slope in the logarithm of a term's column is an own-price elasticity. */
export function isPriceTerm(model: FittedModel, term: FittedTerm): boolean {
  return model.spec.family !== "gaussian" && term.kind !== "factor" && term.columns[0] === "price";
}

/** Every term's curve over the values seen, with its band and, for price, its elasticities. */
export function modelCurves(model: FittedModel, { level, points }: { level: number; points: number }): DriverCurve[] {
  return model.terms.map((term) => ({
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
