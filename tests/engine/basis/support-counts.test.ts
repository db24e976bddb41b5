import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { supportCounts } from "@shared/engine";
import { driverRows, fittedTerm } from "./term-values";

const data = driverRows(17, 80);
const runs = { numRuns: 50, seed: 20260109 };
const anywhere = fc.array(fc.double({ min: 0.5, max: 4, noNaN: true }), { minLength: 1, maxLength: 12 });
const range = (values: readonly number[]) => Math.max(...values) - Math.min(...values);

describe("Rows that support a value", () => {
  it("are those within a twentieth of the range on either side", () => {
    const term = fittedTerm({ kind: "smooth", column: "price" }, data, ["price"]);
    const half = 0.05 * range(data.price);
    fc.assert(fc.property(anywhere, (prices) => {
      const expected = prices.map((price) => data.price.filter((value) => Math.abs(value - price) <= half).length);
      expect([...supportCounts(term, Float64Array.from(prices))]).toEqual(expected);
    }), runs);
  });

  it("are counted on the logarithm's scale for a term that has one", () => {
    const term = fittedTerm({ kind: "natural-spline", column: "price", df: 3, log: true }, data, ["price"]);
    const half = 0.05 * range(data.price.map(Math.log));
    fc.assert(fc.property(anywhere, (prices) => {
      const expected = prices.map((price) => data.price.filter((value) => Math.abs(Math.log(value) - Math.log(price)) <= half).length);
      expect([...supportCounts(term, Float64Array.from(prices))]).toEqual(expected);
    }), runs);
  });

  it("on a circle wrap round its ends", () => {
    const term = fittedTerm({ kind: "cyclic-smooth", column: "week", period: [0, 52] }, data, ["week"]);
    const distance = (left: number, right: number) => {
      const apart = (((left - right) % 52) + 52) % 52;
      return Math.min(apart, 52 - apart);
    };
    fc.assert(fc.property(fc.array(fc.integer({ min: -60, max: 110 }), { minLength: 1, maxLength: 8 }), (weeks) => {
      const expected = weeks.map((week) => data.week.filter((value) => distance(value, week) <= 2.6).length);
      expect([...supportCounts(term, Float64Array.from(weeks))]).toEqual(expected);
    }), runs);
  });

  it("are a level's or a group's own, and none for one never seen", () => {
    const factor = fittedTerm({ kind: "factor", column: "promotion" }, data, ["promotion"]);
    const feature = data.promotion.filter((level) => level === "feature").length;
    expect([...supportCounts(factor, ["feature", "coupon", "none"])]).toEqual([feature, 0, 80 - feature]);
    const effect = fittedTerm({ kind: "random-effect", column: "store" }, data, ["store"]);
    expect([...supportCounts(effect, ["s3", "new"])]).toEqual([20, 0]);
  });

  it("of one group's curve are that group's, within a twentieth of the whole column's range", () => {
    const term = fittedTerm({ kind: "factor-smooth", column: "price", group: "store" }, data, ["price", "store"]);
    const half = 0.05 * range(data.price);
    fc.assert(fc.property(anywhere, (prices) => {
      const near = (price: number, row: number) => Math.abs(data.price[row] - price) <= half;
      const rows = data.price.map((_, row) => row);
      const ofGroup = prices.map((price) => rows.filter((row) => data.store[row] === "s2" && near(price, row)).length);
      const ofAll = prices.map((price) => rows.filter((row) => near(price, row)).length);
      expect([...supportCounts(term, Float64Array.from(prices), "s2")]).toEqual(ofGroup);
      expect([...supportCounts(term, Float64Array.from(prices))]).toEqual(ofAll);
    }), runs);
  });

  it("of a week of a random walk are those of weeks near it", () => {
    const term = fittedTerm({ kind: "random-walk", column: "week" }, data, ["week"]);
    const half = 0.05 * range(data.week);
    const weeks = [18, 20, 33, 52, 60];
    const expected = weeks.map((week) => data.week.filter((value) => Math.abs(value - week) <= half).length);
    expect([...supportCounts(term, Float64Array.from(weeks))]).toEqual(expected);
    expect(expected[0]).toBe(0);
  });
});
