import type { Driver } from "../driver";
import { logarithmicMean, logarithmicMeanSlopes } from "../logarithmic-mean";
import { ratioInterval, varianceOver } from "./delta-method";
import type { Interval, SplitRow } from "./scenario";
import type { StoreEvaluation } from "./store-evaluation";

/** Sums of expected units over all stores and weeks, in the three states. */
export type ScenarioTotals = { plan: number; base: number; normal: number };

/** Rows that the sum column always has, in its order; further drivers follow where they differ. */
const FIRST_DRIVERS: readonly Driver[] = ["price", "promotion", "mechanic", "event"];
const ALWAYS_SHOWN: readonly Driver[] = ["price", "promotion"];

/**
 * Sums expected units over stores.
 *
 * @example totalsOf(evaluations).plan
 */
export function totalsOf(stores: readonly StoreEvaluation[]): ScenarioTotals {
  const totals: ScenarioTotals = { plan: 0, base: 0, normal: 0 };
  for (const { plan, base, normal } of stores) {
    totals.plan += plan.total;
    totals.base += base.total;
    totals.normal += normal.total;
  }
  return totals;
}

/**
 * The lift of a total, sum of plan / sum of base - 1, and its interval by the delta method on ln(sum of plan) - ln(sum of base):
 * coefficients only, what plan and base share cancels.
 *
 * @param z half the interval's width in standard deviations.
 * @example liftOf(evaluations, { totals, z: 1.28 }).estimate // 0.42
 */
export function liftOf(stores: readonly StoreEvaluation[], { totals, z }: { totals: ScenarioTotals; z: number }): Interval {
  const variance = varianceOver(stores, ({ plan, base }) => [
    { factor: 1 / totals.plan, gradient: plan.totalGradient },
    { factor: -1 / totals.base, gradient: base.totalGradient },
  ]);
  const ratio = ratioInterval({ log: Math.log(totals.plan / totals.base), variance, z });
  return { estimate: totals.plan / totals.base - 1, lower: ratio.lower - 1, upper: ratio.upper - 1 };
}

/**
 * What the plan's weather adds to the base in normal weather: units, and the ratio of the two bases with its interval.
 *
 * @example weatherOf(evaluations, { totals, z: 1.28 }).units // totals.base - totals.normal
 */
export function weatherOf(stores: readonly StoreEvaluation[], { totals, z }: { totals: ScenarioTotals; z: number }): SplitRow {
  const variance = varianceOver(stores, ({ base, normal }) => [
    { factor: 1 / totals.base, gradient: base.totalGradient },
    { factor: -1 / totals.normal, gradient: normal.totalGradient },
  ]);
  const multiplier = ratioInterval({ log: Math.log(totals.base / totals.normal), variance, z });
  return { driver: "temperature", units: totals.base - totals.normal, multiplier };
}

/**
 * The drivers' rows between base and plan. A driver's units are the sum of its LMDI-I units over store-weeks; its multiplier is
 * exp(units / L), L the logarithmic mean of (sum of plan, sum of base), so units add up to the difference and multipliers
 * multiply to 1 + lift. The multiplier's interval is by the delta method on units / L, coefficients only.
 *
 * @returns price and promotion always, then what else differs (mechanic, event, interactions and other columns by name).
 * @example splitOf(evaluations, { totals, z: 1.28 })[0] // { driver: "price", units: 2858, multiplier: { estimate: 1.52, ... } }
 */
export function splitOf(stores: readonly StoreEvaluation[], { totals, z }: { totals: ScenarioTotals; z: number }): SplitRow[] {
  const mean = logarithmicMean(totals.plan, totals.base);
  const slopes = logarithmicMeanSlopes(totals.plan, totals.base);
  return driversOf(stores).map((driver) => {
    const units = stores.reduce((sum, store) => sum + (store.drivers.get(driver)?.units ?? 0), 0);
    const byMean = -units / (mean * mean);
    const variance = varianceOver(stores, ({ plan, base, drivers }) => [
      { factor: 1 / mean, gradient: drivers.get(driver)?.gradient },
      { factor: (byMean * slopes.byLogOne) / totals.plan, gradient: plan.totalGradient },
      { factor: (byMean * slopes.byLogOther) / totals.base, gradient: base.totalGradient },
    ]);
    return { driver, units, multiplier: ratioInterval({ log: units / mean, variance, z }) };
  });
}

function driversOf(stores: readonly StoreEvaluation[]): Driver[] {
  const differing = new Set(stores.flatMap(({ drivers }) => [...drivers.keys()]));
  const first = FIRST_DRIVERS.filter((driver) => ALWAYS_SHOWN.includes(driver) || differing.has(driver));
  const others = [...differing].filter((driver) => !first.includes(driver)).sort();
  return [...first, ...others];
}
