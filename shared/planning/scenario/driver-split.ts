import { transposeTimes } from "../../engine";
import type { FittedModel } from "../../engine";
import { driverOfTerm } from "../driver";
import type { Driver } from "../driver";
import { logarithmicMean, logarithmicMeanSlopes } from "../logarithmic-mean";
import type { CellPredictions } from "./cell-predictions";

/** Units that one driver adds in one store, and their gradient with respect to the store's coefficients. */
export type DriverUnits = { units: number; gradient: Float64Array };

/**
 * Splits the difference between two predictions of the same cells among the drivers, by LMDI-I: per cell, a driver's units are
 * L(plan, base) x the difference of its contributions on the log scale, L the logarithmic mean; then summed over cells. The parts
 * add up to the difference exactly and do not depend on any order (Ang, Energy Policy 33 (2005) 867-871). Terms of the same
 * driver are one part, an interaction is a part of its own.
 *
 * @returns the drivers whose contributions differ in some cell; gradients of length `model.coefficients.length`, by
 * d(L c) = L dc + c dL, for intervals by the delta method.
 * @example splitAmongDrivers({ model, plan, base }).get("price")?.units
 */
export function splitAmongDrivers(
  { model, plan, base }: { model: FittedModel; plan: CellPredictions; base: CellPredictions },
): Map<Driver, DriverUnits> {
  const parts = new Map<Driver, DriverUnits>();
  const weights = plan.mean.map((value, cell) => logarithmicMean(value, base.mean[cell]));
  for (const [driver, termIds] of termsByDriver(model)) {
    const difference = differenceOf({ plan, base, termIds });
    if (difference.every((value) => value === 0)) continue;
    const units = difference.reduce((sum, value, cell) => sum + weights[cell] * value, 0);
    parts.set(driver, { units, gradient: gradientOf({ model, plan, base, termIds, weights, difference }) });
  }
  return parts;
}

function termsByDriver(model: FittedModel): Map<Driver, string[]> {
  const groups = new Map<Driver, string[]>();
  for (const term of model.terms) {
    const driver = driverOfTerm(term);
    groups.set(driver, [...(groups.get(driver) ?? []), term.id]);
  }
  return groups;
}

type Pair = { plan: CellPredictions; base: CellPredictions; termIds: readonly string[] };

function differenceOf({ plan, base, termIds }: Pair): Float64Array {
  const difference = new Float64Array(plan.mean.length);
  for (const id of termIds) {
    const [inPlan, inBase] = [plan.contributions[id], base.contributions[id]];
    for (let cell = 0; cell < difference.length; cell++) difference[cell] += inPlan[cell] - inBase[cell];
  }
  return difference;
}

function gradientOf(
  { model, plan, base, termIds, weights, difference }:
  Pair & { model: FittedModel; weights: Float64Array; difference: Float64Array },
): Float64Array {
  const byPlan = new Float64Array(difference.length);
  const byBase = new Float64Array(difference.length);
  for (let cell = 0; cell < difference.length; cell++) {
    const slopes = logarithmicMeanSlopes(plan.mean[cell], base.mean[cell]);
    byPlan[cell] = difference[cell] * slopes.byLogOne;
    byBase[cell] = difference[cell] * slopes.byLogOther;
  }
  const own = ({ rows }: CellPredictions) => ({ ...rows, parts: rows.parts.filter((part) => termIds.includes(part.id)) });
  const gradient = transposeTimes(model, plan.rows, byPlan);
  add(gradient, transposeTimes(model, base.rows, byBase), 1);
  add(gradient, transposeTimes(model, own(plan), weights), 1);
  add(gradient, transposeTimes(model, own(base), weights), -1);
  return gradient;
}

function add(to: Float64Array, values: Float64Array, factor: number): void {
  for (let index = 0; index < to.length; index++) to[index] += factor * values[index];
}
