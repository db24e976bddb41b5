import type { Driver } from "../driver";
import { netOfTax } from "../money";
import type { CellFlag } from "./limits";
import type { PlanCell, ScenarioFlag } from "./scenario";
import type { EvaluatedStore } from "./scenario-units";

/**
 * All there is to distrust in a scenario, one flag per reason, driver and side, with the stores and weeks it bears on: values
 * outside what a store has seen or seen in fewer than 5 weeks, levels never seen, drivers the plan moves that a store's model does
 * not have, and prices below cost.
 *
 * @param stores evaluated; `storeCount` in sentences is their number.
 * @example flagsOf(stores).map((flag) => flag.detail)
 */
export function flagsOf(stores: readonly EvaluatedStore[]): ScenarioFlag[] {
  const flags = stores.flatMap((store) => [...seenFlagsOf(store), ...unmodelledFlagsOf(store), ...belowCostFlagsOf(store)]);
  const groups = new Map<string, CellFlag[]>();
  for (const flag of flags) {
    const key = `${flag.code} ${flag.driver} ${flag.of}`;
    const group = groups.get(key);
    if (group === undefined) groups.set(key, [flag]);
    else group.push(flag);
  }
  return [...groups.values()].map((group) => together(group, stores.length));
}

/** The base's flags only where the base has a value of its own: what it shares with the plan is flagged there. */
function seenFlagsOf({ plan, base, cells }: EvaluatedStore): CellFlag[] {
  if (base.flags.length === 0) return plan.flags;
  const repriced = new Set(cells.filter((cell) => cell.price !== cell.regularPrice).map((cell) => cell.week));
  return [...plan.flags, ...base.flags.filter((flag) => flag.driver === "price" && repriced.has(flag.week))];
}

/** The value of each driver that a plan moves away from its base, null where it does not. */
const movedValue: readonly [Driver, (cell: PlanCell) => number | string | null][] = [
  ["price", (cell) => (cell.price === cell.regularPrice ? null : cell.price)],
  ["promotion", (cell) => (cell.promotion === "none" ? null : cell.promotion)],
  ["mechanic", (cell) => (cell.mechanic === "none" ? null : cell.mechanic)],
  [
    "temperature",
    ({ temperatureC, normalTemperatureC }) =>
      normalTemperatureC === null || temperatureC === normalTemperatureC ? null : temperatureC,
  ],
];

function unmodelledFlagsOf({ store, modelled, cells }: EvaluatedStore): CellFlag[] {
  const flags: CellFlag[] = [];
  for (const [driver, valueIn] of movedValue) {
    if (modelled.has(driver)) continue;
    for (const cell of cells) {
      const value = valueIn(cell);
      if (value !== null) flags.push({ code: "not-modelled", driver, of: "plan", store, week: cell.week, value });
    }
  }
  return flags;
}

function belowCostFlagsOf({ store, cells }: EvaluatedStore): CellFlag[] {
  const flags: CellFlag[] = [];
  for (const { week, price, pricePaid, taxRate, unitCost } of cells) {
    if (unitCost === null || netOfTax(pricePaid ?? price, taxRate) >= unitCost) continue;
    flags.push({ code: "below-cost", driver: "price", of: "plan", store, week, value: price });
  }
  return flags;
}

function together(group: readonly CellFlag[], storeCount: number): ScenarioFlag {
  const [{ code, driver, of }] = group;
  const stores = [...new Set(group.map((flag) => flag.store))];
  const weeks = [...new Set(group.map((flag) => flag.week))].sort();
  return { code, driver, of, stores, weeks, detail: sentence({ group, stores: stores.length, storeCount }) };
}

function sentence({ group, stores, storeCount }: { group: readonly CellFlag[]; stores: number; storeCount: number }): string {
  const [{ code, driver, of }] = group;
  const where = storeCount === 1 ? "here" : `in ${stores} of ${storeCount} stores`;
  const what = `${of === "base" ? "Regular price" : capitalised(driver ?? "value")} ${valuesIn(group)}`;
  switch (code) {
    case "outside-range":
      return `${what} lies outside what was seen ${where}.`;
    case "few-weeks":
      return `${what} was seen in fewer than 5 weeks ${where}.`;
    case "never-seen":
      return `${what} was never seen ${where}: it is predicted without any effect of its own.`;
    case "not-modelled":
      return `The effect of ${driver} could not be learnt ${where}: it is left out of the prediction.`;
    case "below-cost":
      return `The price without tax is below unit cost ${where}.`;
  }
}

function valuesIn(group: readonly CellFlag[]): string {
  const values = group.map(({ value }) => value);
  if (!values.every((value) => typeof value === "number")) return [...new Set(values)].join(", ");
  const [lowest, highest] = [Math.min(...values), Math.max(...values)].map((value) => String(Number(value.toFixed(4))));
  return lowest === highest ? lowest : `${lowest} to ${highest}`;
}

function capitalised(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1);
}
