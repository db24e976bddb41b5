import { describe, expect, it } from "vitest";
import { dayOfWeek, weeksApart } from "@shared/calendar";
import { weeksBefore } from "../../demo/chain/calendar";
import { easterSunday } from "../../demo/chain/easter";
import { eventsOfYears } from "../../demo/chain/events";
import { products } from "../../demo/chain/products";
import { stores } from "../../demo/chain/stores";

describe("The demo chain", () => {
  it("has 24 stores, eight in each region, and each response group in every region", () => {
    expect(stores).toHaveLength(24);
    for (const region of ["Coast", "Town", "Moor"]) {
      const here = stores.filter((store) => store.region === region);
      expect(here).toHaveLength(8);
      expect(new Set(here.map(({ group }) => group))).toEqual(new Set(["keen", "middle", "steady"]));
    }
    expect(new Set(stores.map(({ name }) => name)).size).toBe(24);
  });

  it("keeps its response groups apart: every keen store answers more than every middle one, and so on", () => {
    const of = (group: string) =>
      stores.filter((store) => store.group === group).map(({ priceResponse }) => priceResponse);
    expect(Math.min(...of("keen"))).toBeGreaterThan(Math.max(...of("middle")));
    expect(Math.min(...of("middle"))).toBeGreaterThan(Math.max(...of("steady")));
    expect(["keen", "middle", "steady"].map((group) => of(group).length)).toEqual([8, 8, 8]);
  });

  it("has 18 products, three in each of six categories, one of them sold by weight", () => {
    expect(products).toHaveLength(18);
    const counts = new Map<string, number>();
    for (const { category } of products) counts.set(category, (counts.get(category) ?? 0) + 1);
    expect([...counts.values()]).toEqual([3, 3, 3, 3, 3, 3]);
    expect(products.filter(({ soldByWeight }) => soldByWeight)).toHaveLength(1);
  });

  it("prices every product above its cost, net of tax, in terms that follow each other from the first week on", () => {
    for (const { code, prices } of products) {
      expect(prices[0].fromWeek, code).toBe(0);
      expect(new Set(prices.map(({ fromWeek }) => fromWeek)).size, code).toBe(prices.length);
      const weeks = prices.map(({ fromWeek }) => fromWeek);
      expect(weeks, code).toEqual([...weeks].sort((one, other) => one - other));
      for (const { regularPrice, taxRate, unitCost } of prices) {
        expect(regularPrice / (1 + taxRate), code).toBeGreaterThan(unitCost);
      }
    }
  });

  it("counts its 156 weeks back from the last Monday to Sunday that is over", () => {
    for (const today of ["2026-06-01", "2026-06-04", "2026-06-07"]) {
      const weeks = weeksBefore(today);
      expect(weeks).toHaveLength(156);
      expect(weeks.at(-1)).toBe("2026-05-25");
      expect(dayOfWeek(weeks[0])).toBe(1);
      expect(weeksApart(weeks[0], "2026-05-25")).toBe(155);
    }
    expect(weeksBefore("2026-06-08").at(-1)).toBe("2026-06-01");
  });

  it("refuses a today that is no day", () => {
    expect(() => weeksBefore("June")).toThrow('"June" is not a day');
  });

  it.each([
    [1818, "1818-03-22"], [2000, "2000-04-23"], [2024, "2024-03-31"],
    [2025, "2025-04-20"], [2026, "2026-04-05"], [2038, "2038-04-25"],
  ])("keeps Easter %i on %s", (year, day) => {
    expect(easterSunday(year)).toBe(day);
  });

  it("holds events that fill whole weeks and never meet in a region", () => {
    const events = eventsOfYears(2020, 2045);
    for (const region of ["Coast", "Town", "Moor"]) {
      const here = events.filter((event) => event.region === null || event.region === region);
      expect(new Set(here.map(({ firstDay }) => firstDay)).size).toBe(here.length);
    }
    for (const { firstDay, lastDay } of events) {
      expect(dayOfWeek(firstDay)).toBe(1);
      expect(dayOfWeek(lastDay)).toBe(0);
    }
  });
});
