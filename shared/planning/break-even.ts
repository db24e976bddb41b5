import { extraCost } from "./money";
import type { PlanCosts, PlanMargins } from "./money";

/** The lift at which a plan neither gains nor loses, or why there is none. */
export type BreakEven =
  | { kind: "lift"; lift: number }
  | { kind: "none needed" }
  | { kind: "cannot break even" }
  | { kind: "unknown"; reason: string };

/** One cell of a plan with the same cut throughout; all amounts net of tax. */
export type BreakEvenCell = {
  /** Regular price - unit cost (m). */
  unitMargin: number;
  /** Price cut (d). */
  cut: number;
  /** Supplier's funding per unit (s), 0 unless given. */
  fundingPerUnit?: number;
  fixedCost?: number;
  lumpFunding?: number;
  /** Needed only where there is a fixed cost or a lump sum. */
  baseUnits?: number;
};

/**
 * The break-even lift of one cell: (d - s) / (m - d + s) + (fixed cost - lump funding) / (base units x (m - d + s)), with unit
 * margin m, cut d and funding per unit s net of tax (the common break-even rule of price cuts, for example Nagle & Mueller,
 * "The Strategy and Tactics of Pricing", chapter on financial analysis; from memory).
 *
 * @returns "cannot break even" where m - d + s is not positive; "none needed" where the result is not.
 * @example breakEvenOfCell({ unitMargin: 45, cut: 5 }) // { kind: "lift", lift: 0.125 }: a 5 % cut at 45 % margin
 */
export function breakEvenOfCell(cell: BreakEvenCell): BreakEven {
  const { unitMargin, cut, fundingPerUnit = 0, baseUnits = 0 } = cell;
  const marginInPlan = unitMargin - cut + fundingPerUnit;
  const toEarnBack = extraCost(cell);
  if (marginInPlan <= 0) return { kind: "cannot break even" };
  if (toEarnBack !== 0 && !(baseUnits > 0)) {
    return { kind: "unknown", reason: "Without base units a cost has nothing to be spread over." };
  }
  const spread = toEarnBack === 0 ? 0 : toEarnBack / (baseUnits * marginInPlan);
  return liftOrNoneNeeded((cut - fundingPerUnit) / marginInPlan + spread);
}

/**
 * The break-even lift of a plan: k x sum of plan units / sum of base units - 1, with
 * k = (sum of base x m + fixed cost - lump funding + similar products' lost margin + dip after) / sum of plan x (m - d + s):
 * the factor by which all planned units would have to change for the net gain to be zero. For one cell it equals
 * `breakEvenOfCell`.
 *
 * @returns "cannot break even" where the denominator is not positive; "none needed" where the result is not; "unknown" where
 * nothing is sold at base.
 * @example breakEvenOfPlan({ base: 45, plan: 48, baseUnits: 100, planUnits: 120 }) // lift 0.125
 */
export function breakEvenOfPlan(margins: PlanMargins, costs: PlanCosts = {}): BreakEven {
  if (margins.plan <= 0) return { kind: "cannot break even" };
  if (!(margins.baseUnits > 0)) return { kind: "unknown", reason: "Nothing is sold at base, so there is no lift on it." };
  const factor = (margins.base + extraCost(costs)) / margins.plan;
  return liftOrNoneNeeded((factor * margins.planUnits) / margins.baseUnits - 1);
}

function liftOrNoneNeeded(lift: number): BreakEven {
  return lift > 0 ? { kind: "lift", lift } : { kind: "none needed" };
}
