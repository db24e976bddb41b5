import { columnsOf as columnNames } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { PlanningError, defaultSpec, describeVariation, toModelData } from "@shared/planning";
import type { SalesRow, Variation } from "@shared/planning";
import { salesRows } from "./a-sales-row";

const twoYears: Variation = {
  weeks: 104, weeksSpanned: 104, unitsSold: 4_000, distinctPrices: 12, distinctTemperatures: 80,
  promotion: { none: 90, feature: 10, display: 4 }, mechanic: { none: 104 }, event: { none: 104 },
};

const describeRows = (count: number, changes: (index: number) => Partial<SalesRow>) =>
  describeVariation(toModelData(salesRows(count, changes)).data);

const columnsOf = (variation: Variation) =>
  defaultSpec(variation).spec.terms.map((term) => `${term.kind} ${columnNames(term).join(" ")}`);

describe("the default specification", () => {
  it("has curves of log price and temperature, a circle of the year and levels of promotion", () => {
    expect(defaultSpec(twoYears).spec).toEqual({
      response: "units",
      family: "quasi-poisson",
      offset: "logExposure",
      terms: [
        { kind: "smooth", column: "price", log: true, size: 8 },
        { kind: "factor", column: "promotion", reference: "none" },
        { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] },
        { kind: "smooth", column: "temperatureC", size: 8 },
      ],
    });
  });

  it("has mechanics and events only when there were any, and says what it left out", () => {
    const { leftOut } = defaultSpec(twoYears);
    expect(leftOut).toEqual([
      { driver: "mechanic", reason: "There was no week with a mechanic." },
      { driver: "event", reason: "There was no week with an event." },
    ]);
    expect(columnsOf({ ...twoYears, mechanic: { none: 100, multi_buy: 4 }, event: { none: 100, fair: 4 } })).toEqual(
      expect.arrayContaining(["factor mechanic", "factor event"]),
    );
  });

  it("leaves a driver out that never varied or is not known", () => {
    const { spec, leftOut } = defaultSpec({ ...twoYears, distinctPrices: 1, distinctTemperatures: null });
    expect(spec.terms.flatMap(columnNames)).toEqual(["promotion", "yearFraction"]);
    expect(leftOut).toContainEqual({ driver: "price", reason: "The price never varied." });
    expect(leftOut).toContainEqual({ driver: "temperature", reason: "The temperature of too many weeks is not known." });
  });

  it("leaves promotion out when no week was without it", () => {
    const { leftOut } = defaultSpec({ ...twoYears, promotion: { feature: 50, both: 54 } });
    expect(leftOut).toContainEqual({
      driver: "promotion",
      reason: "There was no week without a promotion to compare with.",
    });
  });

  it("draws a straight line through two or three prices", () => {
    const { spec, straightLines } = defaultSpec({ ...twoYears, distinctPrices: 3 });
    expect(spec.terms[0]).toEqual({ kind: "linear", column: "price", log: true });
    expect(straightLines).toEqual([{ driver: "price", reason: "A straight line: only 3 values were seen." }]);
  });

  it("keeps to straight lines without a season below half a year", () => {
    const fewMonths = { ...twoYears, weeks: 20, weeksSpanned: 20, promotion: { none: 17, feature: 3 } };
    const { spec, leftOut, straightLines } = defaultSpec(fewMonths);
    expect(spec.terms.map((term) => term.kind)).toEqual(["linear", "factor", "linear"]);
    expect(straightLines.map((note) => note.driver)).toEqual(["price", "temperature"]);
    expect(leftOut).toContainEqual({ driver: "season", reason: "20 weeks do not cover a year." });
  });

  it("asks for a full year of weeks, not only of dates, before it models the time of year", () => {
    expect(columnsOf({ ...twoYears, weeks: 51, weeksSpanned: 104 })).not.toContain("cyclic-smooth yearFraction");
    expect(columnsOf({ ...twoYears, weeks: 52, weeksSpanned: 52 })).toContain("cyclic-smooth yearFraction");
  });

  it("spends at most a third as many free coefficients as there are weeks", () => {
    const events = Object.fromEntries(Array.from({ length: 40 }, (_, index) => [`event ${index}`, 1]));
    const { leftOut } = defaultSpec({ ...twoYears, event: { none: 64, ...events } });
    expect(leftOut).toContainEqual({
      driver: "event",
      reason: "104 weeks are too few to tell its effect from that of the other drivers.",
    });
  });

  it("refuses three weeks of history, and weeks without a sale, in words", () => {
    const refusal = (variation: Variation) => {
      try {
        defaultSpec(variation);
      } catch (error) {
        if (error instanceof PlanningError) return { code: error.code, message: error.message };
      }
      return null;
    };
    expect(refusal({ ...twoYears, weeks: 3 })).toEqual({
      code: "too-few-weeks",
      message: "3 weeks of sales are too few to learn from: at least 8 are needed.",
    });
    expect(refusal({ ...twoYears, weeks: 1 })?.message).toBe("1 week of sales are too few to learn from: at least 8 are needed.");
    expect(refusal({ ...twoYears, unitsSold: 0 })).toEqual({
      code: "nothing-sold",
      message: "Nothing was sold in 104 weeks, so there is nothing to learn.",
    });
  });
});

describe("what varied", () => {
  it("is counted from the columns that a model would be fitted to", () => {
    const variation = describeRows(60, (index) => ({
      price: index % 10 === 0 ? 1.49 : 1.79, feature: index % 10 === 0, temperatureC: 5 + (index % 4), units: 10,
      event: index === 7 ? "fair" : null, stockOutDays: index === 3 ? 7 : 0,
    }));
    expect(variation).toEqual({
      weeks: 59, weeksSpanned: 60, unitsSold: 590, distinctPrices: 2, distinctTemperatures: 4,
      promotion: { none: 53, feature: 6 }, mechanic: { none: 59 }, event: { none: 58, fair: 1 },
    });
  });

  it("of no weeks at all is nothing", () => {
    expect(describeVariation(toModelData([]).data)).toMatchObject({ weeks: 0, weeksSpanned: 0, unitsSold: 0, distinctPrices: 0 });
  });
});
