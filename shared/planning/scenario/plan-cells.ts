import type { ModelCell } from "../model-columns";
import { PlanningError } from "../planning-error";
import { NO_EVENT } from "../sales-row";
import type { PlanCell } from "./scenario";

/** The three states a store-week is predicted in. */
export type CellState = "plan" | "base" | "normal";

/**
 * A planned store-week in one of its three states. "plan" is as planned; "base" is at regular price and without promotion,
 * in the plan's weather and event; "normal" is the base in normal weather.
 *
 * @example cellInState(cell, "base").price // cell.regularPrice
 */
export function cellInState(cell: PlanCell, state: CellState): ModelCell {
  const isPlan = state === "plan";
  const price = isPlan ? cell.price : cell.regularPrice;
  return {
    store: cell.store,
    week: cell.week,
    price,
    regularPrice: cell.regularPrice,
    promotion: isPlan ? cell.promotion : "none",
    mechanic: isPlan ? cell.mechanic : "none",
    deal: price < cell.regularPrice ? 1 : 0,
    event: cell.event ?? NO_EVENT,
    temperatureC: temperatureIn(cell, state),
    exposure: cell.exposure ?? 1,
  };
}

function temperatureIn({ temperatureC, normalTemperatureC }: PlanCell, state: CellState): number | null {
  return state === "normal" ? (normalTemperatureC ?? temperatureC) : (temperatureC ?? normalTemperatureC);
}

/**
 * Whether a store-week asks a model for the same prediction as before, in one of its states. Reads the plan's own cells, so
 * that nothing is built for what did not change.
 *
 * @example isSameInState(cell, { ...cell, price: 1.49 }, "base") // true: only the plan moved
 */
export function isSameInState(one: PlanCell, other: PlanCell, state: CellState): boolean {
  const isSameBase =
    one.store === other.store &&
    one.week === other.week &&
    one.regularPrice === other.regularPrice &&
    one.event === other.event &&
    one.exposure === other.exposure &&
    one.temperatureC === other.temperatureC &&
    one.normalTemperatureC === other.normalTemperatureC;
  if (state !== "plan" || !isSameBase) return isSameBase;
  return one.price === other.price && one.promotion === other.promotion && one.mechanic === other.mechanic;
}

/**
 * The cells of a plan by store, each checked: prices and exposure are usable, no store-week comes twice.
 *
 * @param stores the stores that have a model.
 * @throws PlanningError "no-cells", "not-in-plan" (a store without a model), "unusable-value", "cell-repeated".
 * @example groupByStore(plan.cells, ["S1"]).get("S1")
 */
export function groupByStore(cells: readonly PlanCell[], stores: readonly string[]): Map<string, PlanCell[]> {
  if (cells.length === 0) throw new PlanningError("no-cells", "A scenario needs at least one store and one week.");
  const groups = new Map<string, PlanCell[]>(stores.map((store) => [store, []]));
  for (const cell of cells) {
    const group = groups.get(cell.store);
    if (group === undefined) throw new PlanningError("not-in-plan", `Store ${cell.store} has no model to predict it with.`);
    checkValues(cell);
    if (group.some(({ week }) => week === cell.week)) {
      throw new PlanningError("cell-repeated", `${placeOf(cell)} comes twice in the plan.`);
    }
    group.push(cell);
  }
  return groups;
}

/** "Store S1, week 2026-06-08", to begin a sentence about a cell. */
export function placeOf({ store, week }: Pick<PlanCell, "store" | "week">): string {
  return `Store ${store}, week ${week}`;
}

function checkValues(cell: PlanCell): void {
  const exposure = cell.exposure ?? 1;
  if (!(cell.price > 0 && cell.price < Infinity)) refuse(cell, `a price must be above zero, not ${cell.price}`);
  if (!(cell.regularPrice > 0 && cell.regularPrice < Infinity)) {
    refuse(cell, `a regular price must be above zero, not ${cell.regularPrice}`);
  }
  if (!(exposure > 0 && exposure <= 1)) refuse(cell, `exposure must be above 0 and at most 1, not ${exposure}`);
  if (!(cell.taxRate >= 0)) refuse(cell, `a tax rate must not be below zero, not ${cell.taxRate}`);
}

function refuse(cell: PlanCell, rule: string): never {
  throw new PlanningError("unusable-value", `${placeOf(cell)}: ${rule}.`);
}
