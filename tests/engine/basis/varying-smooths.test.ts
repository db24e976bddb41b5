import { describe, expect, it } from "vitest";
import { basisLogSlopeRows, basisRows, coefficientNames, columnsOf, termId } from "@shared/engine/basis/term-basis";
import { addTransposeTimes } from "@shared/engine/linalg/sparse-rows";
import { denseOf, unsigned } from "../linalg/storages";
import { largestDifference } from "../support/measures";
import { curveAt, driverRows, learn, someCoefficients, valuesOf } from "./term-values";

const data = driverRows(3);
const plain = learn("smooth", { kind: "smooth", column: "price", log: true, size: 7 }, data);

describe("A smooth times a column of numbers", () => {
  const term = { kind: "smooth", column: "price", log: true, size: 7, by: "temperature" } as const;
  const { basis, rows, seen, observedRange } = learn("scaled-smooth", term, data);

  it("has the knots of the smooth, and its rows times the number", () => {
    const { lower, upper, size, by, log } = basis;
    expect({ lower, upper, size, by, log }).toEqual({ lower: plain.basis.lower, upper: plain.basis.upper, size: 7, by: "temperature", log: true });
    const expected = denseOf(plain.rows, 60).map((value, at) => value * data.temperature[Math.floor(at / 7)]);
    expect(unsigned(denseOf(rows, 60))).toEqual(unsigned(expected));
  });

  it("sums to the number in every row of new data, beyond the range too", () => {
    const next = { price: [0.5, 1.5, 9], temperature: [-3, 0, 7] };
    const sums = curveAt(basis, new Float64Array(7).fill(1), next, 3);
    expect(largestDifference(sums, next.temperature)).toBeLessThan(1e-12);
  });

  it("has slopes by ln x that are the smooth's times the number", () => {
    const next = { price: [1.2, 2.2], temperature: [4, -5] };
    const coefficients = someCoefficients(7);
    const own = valuesOf(basisLogSlopeRows(basis, next)!, coefficients, 2);
    const single = valuesOf(basisLogSlopeRows(plain.basis, next)!, coefficients, 2);
    expect([...own]).toEqual([4 * single[0], -5 * single[1]]);
  });

  it("reads both columns, is named by both, and keeps what it saw of its own", () => {
    expect(columnsOf(term)).toEqual(["price", "temperature"]);
    expect(termId(term)).toBe("price:temperature");
    expect(coefficientNames(basis, "price:temperature")).toHaveLength(7);
    expect(seen).toEqual(plain.seen);
    expect(observedRange).toEqual(plain.observedRange);
  });

  it("refuses a number that is not finite, by column and row", () => {
    expect(() => basisRows(basis, { price: [1.2, 1.3], temperature: [1, Infinity] })).toThrow(
      'Column "temperature" (smooth\'s by) must be finite; row 2 is Infinity.',
    );
  });
});

describe("A smooth per level", () => {
  const term = { kind: "smooth", column: "price", log: true, size: 7, by: "promotion" } as const;
  const { basis, rows, seen } = learn("levelled-smooth", term, data);
  const isFeature = data.promotion.map((level) => level === "feature");

  it("has the splines of the whole column's knots, in the columns of the row's level", () => {
    expect(basis.levels).toEqual(["feature", "none"]);
    expect([basis.lower, basis.upper]).toEqual([plain.basis.lower, plain.basis.upper]);
    const own = denseOf(rows, 60);
    const single = denseOf(plain.rows, 60);
    for (let row = 0; row < 60; row++) {
      const first = isFeature[row] ? 0 : 7;
      expect(own.subarray(14 * row + first, 14 * row + first + 7)).toEqual(single.subarray(7 * row, 7 * row + 7));
      expect(own.subarray(14 * row + 7 - first, 14 * row + 14 - first)).toEqual(new Float64Array(7));
    }
  });

  it("keeps the mean of each level's splines over that level's rows", () => {
    const ofFeature = Float64Array.from(isFeature, Number);
    for (const [level, member] of [ofFeature, ofFeature.map((value) => 1 - value)].entries()) {
      const sums = new Float64Array(14);
      addTransposeTimes(rows, member, sums, 0);
      const count = member.reduce((sum, value) => sum + value, 0);
      const means = sums.map((sum) => sum / count).subarray(7 * level, 7 * level + 7);
      expect(largestDifference(basis.centring.subarray(7 * level, 7 * level + 7), means)).toBeLessThan(1e-15);
    }
  });

  it("keeps what each level saw", () => {
    const count = (level: number) => seen.byLevel![level].counts.reduce((sum, value) => sum + value, 0);
    expect(seen.byLevel).toHaveLength(2);
    expect(count(0)).toBe(isFeature.filter(Boolean).length);
    expect(count(0) + count(1)).toBe(60);
    expect([...seen.byLevel![0].values]).toEqual([...new Set(data.price.filter((_, row) => isFeature[row]))].sort((a, b) => a - b));
  });

  it("names every level's splines", () => {
    expect(coefficientNames(basis, "p").filter((_, k) => k % 6 === 0)).toEqual(["p[feature,1]", "p[feature,7]", "p[none,6]"]);
  });

  it("refuses a level never seen, by level and row", () => {
    expect(() => basisRows(basis, { price: [1.2, 1.3], promotion: ["none", "coupon"] })).toThrow(expect.objectContaining({
      code: "level-unknown", message: 'Level "coupon" of factor "promotion" (row 2) was never seen in the fit; seen were "feature", "none".',
    }));
  });
});
