/**
 * An amount without its tax: amount / (1 + rate).
 *
 * @param taxRate a share, for example 0.21.
 * @example netOfTax(1.21, 0.21) // 1
 */
export function netOfTax(amount: number, taxRate: number): number {
  return amount / (1 + taxRate);
}

/**
 * Rounds an amount to whole cents, halves away from zero. Totals are rounded so once, at the end, never their parts.
 * Works on the shortest decimal text of the number, so that 1.005, which binary arithmetic holds as a little less, gives 1.01.
 *
 * @returns the amount; NaN and infinities unchanged.
 * @example roundToCents(-2.345) // -2.35
 */
export function roundToCents(amount: number): number {
  const size = Math.abs(amount);
  // Beyond this every number is whole; below half a cent there is nothing to keep.
  if (!(size < 1e15)) return amount;
  if (size < 0.005) return 0;
  const cents = Math.round(Number(`${size}e2`));
  return Math.sign(amount) * Number(`${cents}e-2`);
}

/** One store-week of a plan: expected units with and without it, and its prices as displayed (with tax) and costs (net). */
export type MoneyCell = {
  baseUnits: number;
  planUnits: number;
  regularPrice: number;
  /** Price paid per unit under the plan. */
  price: number;
  unitCost: number;
  /** Share, for example 0.21. */
  taxRate: number;
  /** What the supplier pays per unit sold under the plan, net of tax. */
  fundingPerUnit: number;
};

/** What a plan costs and brings beside its units, net of tax; each 0 unless given. */
export type PlanCosts = {
  /** For example the cost of a feature. */
  fixedCost?: number;
  /** A lump sum from the supplier. */
  lumpFunding?: number;
  /** Margin that own similar products lose. */
  similarProductsLostMargin?: number;
  /** Margin lost in the weeks after, by demand pulled forward. */
  dipAfter?: number;
};

/** Margins of a plan before any rounding, net of tax. */
export type PlanMargins = {
  /** Sum of base units x m, m = regular price net of tax - unit cost. */
  base: number;
  /** Sum of plan units x (m - d + s), d the price cut net of tax and s the supplier's funding per unit. */
  plan: number;
  baseUnits: number;
  planUnits: number;
};

/**
 * The margins of a plan: sum of base units x m and sum of plan units x (m - d + s), all net of tax.
 *
 * @example
 * planMargins([{ baseUnits: 100, planUnits: 120, regularPrice: 1, price: 0.95, unitCost: 0.55, taxRate: 0, fundingPerUnit: 0 }])
 * // { base: 45, plan: 48, baseUnits: 100, planUnits: 120 }
 */
export function planMargins(cells: Iterable<MoneyCell>): PlanMargins {
  const margins: PlanMargins = { base: 0, plan: 0, baseUnits: 0, planUnits: 0 };
  for (const cell of cells) {
    const unitMargin = netOfTax(cell.regularPrice, cell.taxRate) - cell.unitCost;
    const unitMarginInPlan = netOfTax(cell.price, cell.taxRate) - cell.unitCost + cell.fundingPerUnit;
    margins.base += cell.baseUnits * unitMargin;
    margins.plan += cell.planUnits * unitMarginInPlan;
    margins.baseUnits += cell.baseUnits;
    margins.planUnits += cell.planUnits;
  }
  return margins;
}

/**
 * What must be earned back beside the base's margin: fixed cost - lump funding + similar products' lost margin + dip after.
 *
 * @example extraCost({ fixedCost: 300, lumpFunding: 100 }) // 200
 */
export function extraCost(costs: PlanCosts): number {
  return (costs.fixedCost ?? 0) - (costs.lumpFunding ?? 0) + (costs.similarProductsLostMargin ?? 0) + (costs.dipAfter ?? 0);
}

/**
 * Net gain of a plan, before rounding: its margin less the base's margin and what must be earned back beside.
 *
 * @example netGain({ base: 45, plan: 48, baseUnits: 100, planUnits: 120 }, { fixedCost: 2 }) // 1
 */
export function netGain(margins: PlanMargins, costs: PlanCosts = {}): number {
  return margins.plan - margins.base - extraCost(costs);
}
