import { describe, expect, it } from "vitest";
import { weeksBetween } from "@shared/calendar";
import { priceAxis } from "@/features/scenarios/view/price-axis";
import { beginHistory, redo, stepTo, undo } from "@/features/scenarios/view/history";
import { nearestWeek } from "@/features/scenarios/view/nearest-week";
import { changeAll } from "@/features/scenarios/view/plan-changes";
import { laneNumber } from "@/features/scenarios/view/plan-values";
import { readPrice } from "@/features/scenarios/view/read-price";
import { readOnlyReason, whoseScenario } from "@/features/scenarios/view/whose-scenario";
import { lowestRecentPrice, pastWeeks } from "@/features/scenarios/view/history-weeks";
import { sumParts } from "@/features/scenarios/view/sum-parts";
import { nextWeek } from "@/features/scenarios/view/new-scenario";

const places = [
  { store: "A", week: "2026-06-08" },
  { store: "B", week: "2026-06-08" },
];

describe("changes to a plan", () => {
  it("sets a field in every store-week and keeps what else a cell changes", () => {
    const before = [{ store: "A", week: "2026-06-08", promotion: "feature" as const }];
    expect(changeAll(before, { places, field: "price", value: 1.49 })).toEqual([
      { store: "A", week: "2026-06-08", promotion: "feature", price: 1.49 },
      { store: "B", week: "2026-06-08", price: 1.49 },
    ]);
  });

  it("leaves no cell behind that changes nothing", () => {
    const before = changeAll([], { places, field: "price", value: 1.49 });
    expect(changeAll(before, { places, field: "price", value: undefined })).toEqual([]);
  });

  it("goes back and forth step by step, and forgets what was undone after a new step", () => {
    const first = beginHistory(1);
    const third = stepTo(stepTo(first, 2), 3);
    expect(undo(undo(third)).present).toBe(1);
    expect(redo(undo(third)).present).toBe(3);
    expect(redo(stepTo(undo(third), 9)).present).toBe(9);
    expect(undo(first)).toEqual(first);
  });
});

describe("what a lane stands for", () => {
  it("is the mean with its ends where store-weeks differ", () => {
    expect(laneNumber([1.5, 2.5])).toEqual({ value: 2, mixed: [1.5, 2.5] });
    expect(laneNumber([1.5, 1.5])).toEqual({ value: 1.5 });
    expect(laneNumber([])).toBeNull();
  });

  it("has a price axis of whole coins that holds every price and a tenth beyond what was seen", () => {
    const axis = priceAxis({ seen: [1.19, 1.99], prices: [2.4], digits: 2 });
    expect(axis).toEqual({ min: 1.07, max: 2.4, step: 0.01 });
  });

  it("reads a typed price, and a signed percentage as a change on the regular price", () => {
    expect(readPrice("1,43", 1.79)).toBe(1.43);
    // Whole coins come from the lane's steps; here only rounding of the machine is allowed for.
    expect(readPrice("−20 %", 1.79)).toBeCloseTo(1.432, 10);
    expect(readPrice("+5%", 2)).toBeCloseTo(2.1, 10);
    expect(readPrice("20 %", 1.79)).toBeNull();
    expect(readPrice("cheap", 1.79)).toBeNull();
  });

  it("moves to the neighbouring week by a small step, also over the end of a year", () => {
    const weeks = weeksBetween("2026-12-14", "2027-01-11");
    expect(nearestWeek(weeks, { fraction: 1, from: "2026-12-28" })).not.toBe("2026-12-21");
    expect(nearestWeek(weeks, { fraction: 0.96, from: "2026-12-21" })).toBe("2026-12-14");
    expect(nearestWeek(weeks, { fraction: 0.5, from: "2026-12-21" })).toBe("2026-12-14");
  });
});

const history = (week: string, store: string, units: number, price: number | null) => ({
  week, store, units, netSales: 0, price, priceSource: "shelf", regularPrice: 2, promotion: "none" as const, mechanic: "none",
  temperatureC: null, event: null, openDays: null, stockOutDays: null,
});

describe("the weeks before a plan", () => {
  const name = (week: string) => ({ label: week, year: 2026 });
  const rows = [history("2026-05-04", "A", 5, 1.2), history("2026-05-18", "A", 3, 1.8), history("2026-05-18", "B", 4, 1.7)];

  it("are summed over stores, and a week nobody recorded stays a gap", () => {
    expect(pastWeeks(rows, { before: "2026-05-25", name }).map(({ week, units }) => [week, units])).toEqual([
      ["2026-05-04", 5], ["2026-05-11", null], ["2026-05-18", 7],
    ]);
  });

  it("reach to the plan, so that weeks not recorded yet are a gap, unless those are too many to draw", () => {
    const weeks = (before: string) => pastWeeks(rows, { before, name }).map(({ week }) => week);
    expect(weeks("2026-06-08").slice(2)).toEqual(["2026-05-18", "2026-05-25", "2026-06-01"]);
    expect(weeks("2026-08-24")).toHaveLength(16);
    expect(weeks("2026-08-31")).toHaveLength(3);
    expect(weeks("2026-05-11")).toHaveLength(3);
  });

  it("tell the lowest price of the five weeks before", () => {
    expect(lowestRecentPrice(rows, "2026-05-25")).toBe(1.2);
    expect(lowestRecentPrice(rows, "2026-06-15")).toBe(1.7);
    expect(lowestRecentPrice(rows, "2026-09-07")).toBeNull();
  });
});

describe("the sum column", () => {
  const row = (driver: string, units: number) => ({ driver, units, multiplier: { estimate: 1, lower: 1, upper: 1 } });
  const prediction = {
    level: 0.8, units: { estimate: 180, lower: 150, upper: 210 }, baseUnits: 120, baseInNormalWeather: 100, weather: row("temperature", 20),
    split: [row("price", 40), row("promotion", 20), row("mechanic", 0)], lift: { estimate: 0.5, lower: 0.4, upper: 0.6 }, weeks: [], stores: [],
    money: { netSales: { plan: 0, base: 0 }, grossMargin: null, netGain: null, breakEven: { kind: "unknown" as const, reason: "" } }, flags: [],
  };

  it("runs from base in normal weather over the weather to this base, then through the drivers that move, to the plan", () => {
    const parts = sumParts(prediction);
    expect(parts.map((part) => part.id)).toEqual(["base", "weather", "base-weather", "price", "promotion", "plan"]);
    const steps = parts.filter((part) => part.kind === "step").reduce((sum, part) => sum + part.units, parts[0].units);
    expect(steps).toBe(parts[parts.length - 1].units);
  });
});

describe("a new scenario", () => {
  it("begins with the chain's week after today", () => {
    expect(nextWeek("2026-12-01", 1)).toBe("2026-12-07");
    expect(nextWeek("2026-12-03", 4)).toBe("2026-12-10");
  });
});

describe("whose scenario it is", () => {
  const mine = { createdBy: { id: "me", name: "Ada Kale" }, state: "draft" as const, may: { edit: true } };
  const theirs = { ...mine, createdBy: { id: "other", name: "Ivo Rusk" } };

  it("is said as yours, or by who began it", () => {
    expect(whoseScenario(mine, { personId: "me" })).toBe("yours");
    expect(whoseScenario(theirs, { personId: "me" })).toBe("begun by Ivo Rusk");
  });

  it("gives the reason where it can only be read", () => {
    expect(readOnlyReason(theirs, { mayPlan: true })).toBeNull();
    expect(readOnlyReason({ state: "approved", may: { edit: false } }, { mayPlan: true })).toBe("can be read only, because it is approved");
    expect(readOnlyReason({ ...theirs, may: { edit: false } }, { mayPlan: false })).toBe(
      "can be read only: planners and category managers change scenarios",
    );
  });
});
