import type { Day } from "../calendar";
import type { FittedModel } from "../engine";
import type { PlanCell, StoreModel } from "./scenario/scenario";
import type { Mechanic, Promotion } from "./sales-row";

/** What holds in a store-week before anything is planned. Prices include tax; costs do not. */
export type BaseCell = {
  store: string;
  /** First day of the week. */
  week: Day;
  /** Null where the chain has not said. */
  regularPrice: number | null;
  normalTemperatureC: number | null;
  event: string | null;
  unitCost: number | null;
  /** Share, for example 0.21. */
  taxRate: number;
};

/** What a plan changes in one store-week; what is absent stays as in the base. */
export type PlanChange = {
  store: string;
  week: Day;
  price?: number;
  promotion?: Promotion;
  mechanic?: Mechanic;
  temperatureC?: number;
};

/** Store-weeks a plan asks for that cannot be predicted, and why, in words to follow "Left out:". */
export type LeftOutCells = { store: string; weeks: number; reason: string };

/** What `predictScenario` and `prepareScenario` are asked with, and what had to be left out of it. */
export type PlanInput = { stores: StoreModel[]; cells: PlanCell[]; leftOut: LeftOutCells[] };

/**
 * Puts a plan's changes on its base: one planned store-week per base cell whose store has a model and whose regular price is
 * known. Browser and server both assemble plans here, so that the same plan gives the same figures on both.
 *
 * @param base one cell per store-week of the plan.
 * @param changes at most one per store-week; those outside the base are passed over.
 * @param models the fitted model of each store that has one.
 * @example
 * const { stores, cells } = planInput({ base, changes: [{ store: "S1", week: "2026-06-08", price: 1.49 }], models });
 * predictScenario({ stores, cells, level: 0.8 });
 */
export function planInput(
  { base, changes, models }: { base: readonly BaseCell[]; changes: readonly PlanChange[]; models: ReadonlyMap<string, FittedModel> },
): PlanInput {
  const changeAt = new Map(changes.map((change) => [keyOf(change), change]));
  const stores = new Map<string, StoreModel>();
  const cells: PlanCell[] = [];
  const leftOut = new Map<string, LeftOutCells>();
  for (const cell of base) {
    const model = models.get(cell.store);
    if (model === undefined) {
      addLeftOut(leftOut, cell.store, "the store has no model");
    } else if (cell.regularPrice === null) {
      addLeftOut(leftOut, cell.store, "the regular price is not known");
    } else {
      stores.set(cell.store, { store: cell.store, model });
      cells.push(plannedCell({ ...cell, regularPrice: cell.regularPrice }, changeAt.get(keyOf(cell))));
    }
  }
  return { stores: [...stores.values()], cells, leftOut: [...leftOut.values()] };
}

function plannedCell(base: BaseCell & { regularPrice: number }, change: PlanChange | undefined): PlanCell {
  return {
    store: base.store,
    week: base.week,
    regularPrice: base.regularPrice,
    price: change?.price ?? base.regularPrice,
    promotion: change?.promotion ?? "none",
    mechanic: change?.mechanic ?? "none",
    temperatureC: change?.temperatureC ?? null,
    normalTemperatureC: base.normalTemperatureC,
    event: base.event,
    unitCost: base.unitCost,
    taxRate: base.taxRate,
  };
}

function keyOf({ store, week }: { store: string; week: Day }): string {
  return `${store}\n${week}`;
}

function addLeftOut(leftOut: Map<string, LeftOutCells>, store: string, reason: string): void {
  const key = `${store}\n${reason}`;
  const known = leftOut.get(key) ?? { store, weeks: 0, reason };
  leftOut.set(key, { ...known, weeks: known.weeks + 1 });
}
