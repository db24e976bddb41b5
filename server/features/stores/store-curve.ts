import { curveDifference, termCurve, type FittedModel, type FittedTerm } from "@shared/engine";
import { curveWithKnown, driverOfTerm } from "@shared/planning";
import { isPriceTerm, seenWeekByWeek, type DriverCurve } from "../drivers";

export type Interval = { estimate: number; lower: number; upper: number };

/** One store's part of a comparison. */
export type StoreCurve = { curve: DriverCurve; elasticity: StoreElasticity | null };

/** With its standard error, and the one it would have if penalties were known: for sums over stores. */
export type StoreElasticity = Interval & { standardError: number; knownError: number };

/**
 * A driver's curve in one store on the grid of all stores, relative to the anchor where there is one; levels are those the
 * store knows. The elasticity is the slope d ln(units) / d ln(price) at the anchor.
 */
export function storeCurve(
  { model, term, grid, anchor, level }: {
    model: FittedModel;
    term: DriverCurve["term"];
    grid: readonly number[] | readonly string[];
    anchor: number | null;
    level: number;
  },
): StoreCurve {
  const isPrice = isPriceTerm(model, term);
  const own = knownTo(term, grid);
  const centred = termCurve(model, term.id, { at: own, level, derivative: isPrice });
  const numbers = own.filter((value) => typeof value === "number");
  const isRelative = anchor !== null && numbers.length > 0;
  const curve = isRelative ? { ...centred, ...curveDifference(model, term.id, { at: numbers, from: anchor, level }) } : centred;
  return {
    curve: { term, driver: driverOfTerm(term), curve, seen: seenWeekByWeek(term) },
    elasticity: isPrice && anchor !== null ? elasticityAt({ model, term, anchor, level }) : null,
  };
}

function knownTo(
  term: FittedTerm,
  grid: readonly number[] | readonly string[],
): readonly number[] | readonly string[] {
  const { basis } = term;
  return basis.kind === "factor" ? grid.map(String).filter((level) => basis.levels.includes(level)) : grid;
}

function elasticityAt(
  { model, term, anchor, level }: { model: FittedModel; term: FittedTerm; anchor: number; level: number },
): StoreElasticity | null {
  const { curve, known } = curveWithKnown(model, term.id, { at: [anchor], level, derivative: true });
  if (!curve.derivative || !known.derivative) return null;
  const {
    estimate: [estimate],
    standardError: [standardError],
    lower: [lower],
    upper: [upper],
  } = curve.derivative;
  return { estimate, standardError, lower, upper, knownError: known.derivative.standardError[0] };
}
