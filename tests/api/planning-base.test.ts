import { describe, expect, it } from "vitest";
import { addWeeks, weeksBetween } from "@shared/calendar";
import { contextNotes } from "../../server/features/scenarios/context/context-notes";
import { normalTemperature } from "../../server/features/catalogue";
import { storeNormals } from "../../server/features/scenarios/context/store-temperatures";
import { toldValue } from "../../server/features/scenarios/context/told-value";

const yearsOf = (first: string, count: number, temperature: (week: string, index: number) => number) =>
  weeksBetween(first, addWeeks(first, count - 1)).map((week, index) => ({
    week,
    temperatureC: temperature(week, index),
  }));

describe("a normal temperature", () => {
  it("is the plain mean of the other years where each of them was even", () => {
    const history = yearsOf("2022-01-03", 208, (week) => Number(week.slice(0, 4)) - 2010);
    // Years 2022 to 2025 were at 12, 13, 14 and 15 degrees; 2024 itself does not count.
    expect(normalTemperature(history)("2024-06-10")).toBeCloseTo((12 + 13 + 15) / 3, 1);
  });

  it("takes no notice of the week itself and its own season, however hot", () => {
    const even = yearsOf("2023-01-02", 156, () => 10);
    const hot = even.map((entry) =>
      entry.week >= "2025-05-01" && entry.week <= "2025-08-31" ? { ...entry, temperatureC: 40 } : entry,
    );
    expect(normalTemperature(hot)("2025-06-30")).toBeCloseTo(10, 12);
  });

  it("weighs a week by how near it is in the year, across New Year too", () => {
    // A single warm week at the end of December 2024, asked for from the first days of 2026.
    const history = yearsOf("2024-11-04", 18, (week) => (week === "2024-12-30" ? 8 : 2));
    const at = normalTemperature(history);
    const [same, one, far] = [at("2025-12-29"), at("2026-01-05"), at("2026-01-26")];
    expect(same).toBeGreaterThan(one ?? Infinity);
    expect(one).toBeGreaterThan(far ?? Infinity);
    expect(far).toBeCloseTo(2, 12);
    // A triangle of three weeks, whose shares add up to 3; the warm week lies a day off, so its share is 1 - 1/21.
    expect(same).toBeCloseTo(2 + (6 * (1 - 1 / 21)) / 3, 2);
  });

  it("is not known where no other year covers the time of year", () => {
    expect(normalTemperature(yearsOf("2025-01-06", 10, () => 5))("2025-02-03")).toBeNull();
    expect(normalTemperature([])("2025-02-03")).toBeNull();
  });
});

describe("normal temperatures of stores", () => {
  const region = yearsOf("2024-01-01", 104, () => 10).map((entry) => ({ ...entry, region: "coast", store: "" }));

  it("are the store's own where it has them, and its region's for the rest", () => {
    const own = { region: "", store: "S1", week: "2024-06-10", temperatureC: 13 };
    const normals = storeNormals([own, ...region]);
    expect(normals({ code: "S2", region: "coast" }, "2026-06-08")).toEqual({ temperatureC: 10, isRough: false });
    expect(normals({ code: "S1", region: "coast" }, "2026-06-08").temperatureC).toBeGreaterThan(10);
    expect(normals({ code: "S1", region: "coast" }, "2026-12-07").temperatureC).toBeCloseTo(10, 12);
  });

  it("fall back to the mean of all weeks known, and say so", () => {
    const normals = storeNormals(region.slice(0, 8));
    expect(normals({ code: "S2", region: "coast" }, "2024-02-05")).toEqual({ temperatureC: 10, isRough: true });
    expect(normals({ code: "S2", region: "moor" }, "2024-02-05")).toEqual({ temperatureC: null, isRough: false });
  });
});

describe("a price told for a week", () => {
  const rows = [
    { store: "S1", week: "2026-01-05", regularPrice: 1.9, unitCost: null, event: null },
    { store: "S1", week: "2026-02-02", regularPrice: 2.1, unitCost: 1.2, event: null },
  ];
  const terms = [
    { validFrom: "2025-01-01", regularPrice: 1.8, unitCost: 1, taxRate: 0.1 },
    { validFrom: "2026-01-22", regularPrice: 2, unitCost: null, taxRate: 0.2 },
  ];
  const priceIn = (week: string) => toldValue({ rows, terms, week, what: "regularPrice" });

  it("is the newest of the store's own sales and the terms in force", () => {
    expect(priceIn("2025-12-29")).toBe(1.8);
    expect(priceIn("2026-01-05")).toBe(1.9);
    expect(priceIn("2026-01-12")).toBe(1.9);
    expect(priceIn("2026-01-26")).toBe(2);
    expect(priceIn("2026-02-02")).toBe(2.1);
    expect(priceIn("2026-06-01")).toBe(2.1);
  });

  it("changes with terms in the week that has most of their days", () => {
    // 22 January 2026 is a Thursday, the middle day of the week of the 19th.
    expect(priceIn("2026-01-19")).toBe(2);
  });

  it("is not known before anything told it, or where the terms in force leave it open", () => {
    expect(toldValue({ rows: [], terms, week: "2024-12-02", what: "regularPrice" })).toBeNull();
    expect(toldValue({ rows: [], terms, week: "2026-01-26", what: "unitCost" })).toBeNull();
    expect(toldValue({ rows, terms, week: "2026-02-09", what: "unitCost" })).toBe(1.2);
  });
});

describe("notes on a plan's base", () => {
  const cell = {
    store: "S1",
    week: "2026-01-05",
    regularPrice: 2,
    normalTemperatureC: 5,
    event: null,
    yearFraction: 0.02,
    weekIndex: 2922,
    unitCost: 1,
    taxRate: 0,
  };
  it("are none where nothing is missing", () => {
    expect(contextNotes({ base: [cell], withoutModel: [], skipped: [], roughNormals: [] })).toEqual([]);
  });

  it("name stores without a model or a price, five at most", () => {
    const stores = ["S1", "S2", "S3", "S4", "S5", "S6", "S7"];
    const notes = contextNotes({
      base: [{ ...cell, regularPrice: null }],
      withoutModel: stores,
      skipped: [{ store: "S2", reason: "Too new." }],
      roughNormals: ["S1"],
    });
    expect(notes).toEqual([
      "7 stores have no model: S1, S2, S3, S4, S5 and 2 more.",
      "Store S2 could not be fitted: Too new.",
      "The regular price is not known everywhere in store S1: those weeks are left out.",
      "No other year tells the normal temperature of store S1: the mean of all weeks known is taken.",
    ]);
  });
});
