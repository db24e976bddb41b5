import { expect, it } from "vitest";
import { fitModel } from "@shared/engine";
import { planInput, type BaseCell } from "@shared/planning/plan-input";

const model = fitModel(
  { response: "units", family: "quasi-poisson", terms: [{ kind: "linear", column: "price", log: true }] },
  { units: [40, 22, 61, 35, 18, 50], price: [1.5, 2, 1.2, 1.6, 2.2, 1.3] },
);
const base: BaseCell[] = ["S1", "S2"].flatMap((store) =>
  ["2026-06-08", "2026-06-15"].map((week) => ({
    store, week, regularPrice: 2, normalTemperatureC: 14, event: "fair", unitCost: 1.1, taxRate: 0.21,
  })),
);
const models = new Map([["S1", model], ["S2", model]]);

it("leaves a store-week without a change at regular price, without promotion and in normal weather", () => {
  const { cells, stores, leftOut } = planInput({ base, changes: [], models });
  expect(cells[0]).toEqual({
    store: "S1", week: "2026-06-08", regularPrice: 2, price: 2, promotion: "none", mechanic: "none",
    temperatureC: null, normalTemperatureC: 14, event: "fair", unitCost: 1.1, taxRate: 0.21,
  });
  expect(cells).toHaveLength(4);
  expect(stores.map(({ store }) => store)).toEqual(["S1", "S2"]);
  expect(leftOut).toEqual([]);
});

it("puts each change on its own store-week only", () => {
  const changes = [{ store: "S2", week: "2026-06-15", price: 1.6, promotion: "both" as const, temperatureC: 24 }];
  const { cells } = planInput({ base, changes, models });
  const changed = cells.filter(({ price }) => price !== 2);
  expect(changed).toHaveLength(1);
  expect(changed[0]).toMatchObject({ store: "S2", week: "2026-06-15", price: 1.6, promotion: "both", temperatureC: 24 });
});

it("says which store-weeks it leaves out and why", () => {
  const gaps = base.map((cell) => (cell.store === "S1" && cell.week === "2026-06-15" ? { ...cell, regularPrice: null } : cell));
  const { cells, stores, leftOut } = planInput({ base: gaps, changes: [], models: new Map([["S1", model]]) });
  expect(cells.map(({ store, week }) => [store, week])).toEqual([["S1", "2026-06-08"]]);
  expect(stores.map(({ store }) => store)).toEqual(["S1"]);
  expect(leftOut).toEqual([
    { store: "S1", weeks: 1, reason: "the regular price is not known" },
    { store: "S2", weeks: 2, reason: "the store has no model" },
  ]);
});

it("passes over changes outside the plan's weeks", () => {
  const changes = [{ store: "S1", week: "2026-07-20", price: 1 }];
  expect(planInput({ base, changes, models }).cells.every(({ price }) => price === 2)).toBe(true);
});
