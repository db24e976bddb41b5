import { breakEvenOfPlan } from "../break-even";
import { netGain, netOfTax, planMargins, roundToCents } from "../money";
import type { MoneyCell, PlanCosts } from "../money";
import type { ScenarioMoney } from "./scenario";
import type { EvaluatedStore } from "./scenario-units";

/**
 * Net sales, gross margin, net gain and break-even lift of a plan, net of tax; expected units stay floating-point and each
 * total is rounded to cents once.
 *
 * @returns margins null and break-even "unknown" where a store-week's unit cost is not known.
 * @example moneyOf(stores, { fixedCost: 300 }).breakEven // { kind: "lift", lift: 0.84 }
 */
export function moneyOf(stores: readonly EvaluatedStore[], costs: PlanCosts = {}): ScenarioMoney {
  const netSales = { plan: 0, base: 0 };
  const cells: MoneyCell[] = [];
  let withoutCost = 0;
  for (const store of stores) {
    store.cells.forEach((cell, index) => {
      const { regularPrice, unitCost, taxRate } = cell;
      const price = cell.pricePaid ?? cell.price;
      const [planUnits, baseUnits] = [store.plan.mean[index], store.base.mean[index]];
      netSales.plan += planUnits * netOfTax(price, taxRate);
      netSales.base += baseUnits * netOfTax(regularPrice, taxRate);
      if (unitCost === null) withoutCost++;
      else cells.push({ planUnits, baseUnits, price, regularPrice, unitCost, taxRate, fundingPerUnit: cell.fundingPerUnit ?? 0 });
    });
  }
  const sales = { plan: roundToCents(netSales.plan), base: roundToCents(netSales.base) };
  if (withoutCost > 0) {
    const places = withoutCost === 1 ? "1 store-week" : `${withoutCost} store-weeks`;
    const reason = `The unit cost of ${places} is not known.`;
    return { netSales: sales, grossMargin: null, netGain: null, breakEven: { kind: "unknown", reason } };
  }
  const margins = planMargins(cells);
  return {
    netSales: sales,
    grossMargin: { plan: roundToCents(margins.plan), base: roundToCents(margins.base) },
    netGain: roundToCents(netGain(margins, costs)),
    breakEven: breakEvenOfPlan(margins, costs),
  };
}
