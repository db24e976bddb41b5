import { normalQuantile } from "@shared/engine";
import { varianceOfSum, type PartVariance } from "@shared/planning";
import type { Interval, StoreCurve } from "./store-curve";

/** A store that learnt the driver, and how much it counts. */
export type WeightedCurve = StoreCurve & { baseUnits: number; meanWeeklyUnits: number };

export type ChainCurve = {
  x: number[] | string[];
  estimate: number[];
  elasticity: Interval | null;
  meanWeeklyUnits: number;
};

/**
 * The chain's curve: what happens to all stores' units together when each follows its own curve, ln of the mean of their
 * multipliers weighted by base units; for a level, over the stores that know it. Where curves are relative to an anchor,
 * its slope there is the weighted mean of the stores' elasticities, whose errors add up as `varianceOfSum` says.
 *
 * @param grid values of the curve; stores' curves of numbers are on the same.
 * @param isLog false for models that add drivers up: then the weighted mean itself.
 * @returns null where no store learnt the driver.
 */
export function chainCurve(
  { curves, grid, isLog, level }: {
    curves: readonly WeightedCurve[]; grid: number[] | string[]; isLog: boolean; level: number;
  },
): ChainCurve | null {
  if (curves.length === 0) return null;
  return {
    x: grid,
    estimate: grid.map((value, index) => meanAt({ curves, value, index, isLog })),
    elasticity: meanElasticity(curves, level),
    meanWeeklyUnits: curves.reduce((sum, curve) => sum + curve.meanWeeklyUnits, 0),
  };
}

function meanAt(
  { curves, value, index, isLog }: {
    curves: readonly WeightedCurve[]; value: number | string; index: number; isLog: boolean;
  },
): number {
  let weight = 0;
  let total = 0;
  for (const {
    curve: { curve },
    baseUnits,
  } of curves) {
    const at = typeof value === "string" ? Array.from(curve.x, String).indexOf(value) : index;
    if (at < 0) continue;
    weight += baseUnits;
    total += baseUnits * (isLog ? Math.exp(curve.estimate[at]) : curve.estimate[at]);
  }
  return isLog ? Math.log(total / weight) : total / weight;
}

function meanElasticity(curves: readonly WeightedCurve[], level: number): Interval | null {
  let weight = 0;
  let total = 0;
  const parts: PartVariance[] = [];
  for (const { elasticity, baseUnits } of curves) {
    if (elasticity === null) return null;
    weight += baseUnits;
    total += baseUnits * elasticity.estimate;
    parts.push({ all: (baseUnits * elasticity.standardError) ** 2, known: (baseUnits * elasticity.knownError) ** 2 });
  }
  const estimate = total / weight;
  const half = (normalQuantile(level) * Math.sqrt(varianceOfSum(parts))) / weight;
  return { estimate, lower: estimate - half, upper: estimate + half };
}
