import type { Day } from "../../calendar";
import { varianceOfSum } from "../sum-over-stores";
import type { PartVariance } from "../sum-over-stores";
import { lognormalInterval, varianceOver } from "./delta-method";
import { noiseVariance } from "./noise";
import type { Interval, PlanCell, WeekPrediction } from "./scenario";
import type { StoreEvaluation } from "./store-evaluation";

/** A store's evaluation beside the cells it was made from, in the same order. */
export type EvaluatedStore = StoreEvaluation & { cells: readonly PlanCell[] };

/**
 * Total units under the plan. The interval is of what may be sold: the coefficients' variance (delta method) plus each store-week's noise, as a lognormal matched in mean and variance.
 *
 * @example unitsOf(stores, 1.28) // { estimate: 10210, lower: 9150, upper: 11380 }
 */
export function unitsOf(stores: readonly EvaluatedStore[], z: number): Interval {
  const mean = stores.reduce((sum, { plan }) => sum + plan.total, 0);
  let variance = varianceOver(stores, ({ plan }) => [{ factor: 1, gradient: plan.totalGradient }]);
  for (const { model, plan } of stores) {
    for (const expected of plan.mean) variance += noiseVariance(model, expected);
  }
  return lognormalInterval({ mean, variance, z });
}

/**
 * Units under the plan week by week over all stores, with the same kind of interval as the total, and the base beside.
 *
 * @returns the plan's weeks in order; expected units add up to the total.
 * @example weeksOf(stores, 1.28)[0] // { week: "2026-06-08", units: { ... }, baseUnits: 702 }
 */
export function weeksOf(stores: readonly EvaluatedStore[], z: number): WeekPrediction[] {
  const sums = new Map<Day, { mean: number; noise: number; parts: PartVariance[]; baseUnits: number }>();
  for (const { model, cells, plan, base } of stores) {
    cells.forEach(({ week }, cell) => {
      const sum = sums.get(week) ?? { mean: 0, noise: 0, parts: [], baseUnits: 0 };
      const expected = plan.mean[cell];
      sum.mean += expected;
      sum.parts.push({ all: (expected * plan.standardError[cell]) ** 2, known: (expected * plan.knownError[cell]) ** 2 });
      sum.noise += noiseVariance(model, expected);
      sum.baseUnits += base.mean[cell];
      sums.set(week, sum);
    });
  }
  return [...sums]
    .sort(([one], [other]) => (one < other ? -1 : 1))
    .map(([week, { mean, noise, parts, baseUnits }]) =>
      ({ week, units: lognormalInterval({ mean, variance: varianceOfSum(parts) + noise, z }), baseUnits }));
}
