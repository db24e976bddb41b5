import { describe, expect, it } from "vitest";
import { basisLogSlopeRows } from "@shared/engine/basis/term-basis";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { largestDifference } from "../support/measures";
import { coordinateCurve, curveAt, driverRows, learn, someCoefficients, transformMatrix, valuesOf } from "./term-values";

const data = driverRows(1);
const ascending = (values: readonly number[]) => [...values].sort((left, right) => left - right);

/** Coefficients of a random natural curve. */
function naturalCurve(df: number, log = false) {
  const { basis } = learn("natural-spline", { kind: "natural-spline", column: "price", df, log }, data);
  const { transform, rawWidth } = termCoordinates(basis);
  const { matrix, width } = transformMatrix(transform, rawWidth);
  const coordinates = someCoefficients(width);
  const coefficients = Float64Array.from({ length: rawWidth }, (_, raw) => coordinates.reduce((sum, value, k) => sum + value * matrix[raw * width + k], 0));
  return { basis, coefficients, matrix, width };
}

describe.each([1, 2, 3, 5, 8])("A natural spline of %i degrees of freedom", (df) => {
  const { basis, coefficients, matrix, width } = naturalCurve(df);
  const [from, to] = [basis.knots[0], basis.knots[df]];
  const at = (price: number[]) => curveAt(basis, coefficients, { price }, price.length);

  it("has df coordinates, orthonormal and without the constant", () => {
    expect(width).toBe(df);
    const size = df + 3;
    for (let i = 0; i < width; i++) {
      for (let j = 0; j <= i; j++) {
        let product = 0;
        for (let raw = 0; raw < size; raw++) product += matrix[raw * width + i] * matrix[raw * width + j];
        expect(product).toBeCloseTo(i === j ? 1 : 0, 13);
      }
      expect(coordinateCurve(basis, i).reduce((sum, value) => sum + value, 0)).toBeCloseTo(0, 12);
    }
  });

  it("has no second derivative at the boundary knots", () => {
    const step = (to - from) / 1000;
    const [a, b, c, d] = at([from, from + step, from + 2 * step, from + 3 * step]);
    const [e, f, g, h] = at([to, to - step, to - 2 * step, to - 3 * step]);
    // Exact for a cubic: its second derivative at the first of four points is (2a - 5b + 4c - d) / step^2.
    expect(Math.abs(2 * a - 5 * b + 4 * c - d) / step ** 2).toBeLessThan(1e-7);
    expect(Math.abs(2 * e - 5 * f + 4 * g - h) / step ** 2).toBeLessThan(1e-7);
  });

  it("is a straight line beyond the range", () => {
    const [a, b, c] = at([to, to + 1, to + 2]);
    const [d, e, f] = at([from, from - 1, from - 2]);
    expect(a - 2 * b + c).toBeCloseTo(0, 11);
    expect(d - 2 * e + f).toBeCloseTo(0, 11);
  });
});

describe("A natural spline", () => {
  it("has its knots at the ends and at quantiles of the rows (type 7 of Hyndman & Fan 1996)", () => {
    const { basis } = learn("natural-spline", { kind: "natural-spline", column: "price", df: 4 }, { price: [5, 1, 2, 4, 3, 8, 20] });
    // Positions 0, 1.5, 3, 4.5 and 6 among the sorted 1, 2, 3, 4, 5, 8, 20.
    expect([...basis.knots]).toEqual([1, 2.5, 4, 6.5, 20]);
  });

  it("takes logarithms before quantiles", () => {
    const { basis } = learn("natural-spline", { kind: "natural-spline", column: "price", df: 2, log: true }, { price: [1, 2, 4, 8] });
    expect(basis.knots[1]).toBeCloseTo((Math.log(2) + Math.log(4)) / 2, 14);
  });

  it("has slopes by ln x that differences of its curve come to, with and without a logarithm", () => {
    for (const log of [false, true]) {
      const { basis, coefficients } = naturalCurve(4, log);
      const price = [0.7, 1.1, 1.9, 2.6, 3.5];
      const rows = basisLogSlopeRows(basis, { price })!;
      const slopes = valuesOf(rows, coefficients, price.length);
      const step = 1e-5;
      const moved = (by: number) => curveAt(basis, coefficients, { price: price.map((value) => value * Math.exp(by)) }, price.length);
      const above = moved(step);
      const below = moved(-step);
      // Central differences: step^2 and rounding / step.
      expect(largestDifference(slopes, slopes.map((_, k) => (above[k] - below[k]) / (2 * step)))).toBeLessThan(1e-7);
    }
  });

  it("names every spline and flags what lies outside the rows", () => {
    const term = { kind: "natural-spline", column: "price", df: 2 } as const;
    const { observedRange } = learn("natural-spline", term, data);
    expect(observedRange).toEqual([ascending(data.price)[0], ascending(data.price)[59]]);
  });

  it("refuses knots that fall on one another, naming the value", () => {
    const price = [1, 2, 2, 2, 2, 2, 2, 3, 4, 5];
    expect(() => learn("natural-spline", { kind: "natural-spline", column: "price", df: 5 }, { price })).toThrow(expect.objectContaining({
      name: "EngineError", code: "column-few-values",
      message: 'Term "price": with df 5 two knots fall on 2, a value that many rows of column "price" share; use a smaller df.',
    }));
  });

  it("refuses a constant column and one of three values", () => {
    const learnAt = (price: number[]) => () => learn("natural-spline", { kind: "natural-spline", column: "price", df: 2 }, { price });
    expect(learnAt([2, 2, 2])).toThrow('Term "price": column "price" is constant (2); a curve needs values that vary.');
    expect(learnAt([1, 2, 3])).toThrow('Term "price": column "price" has 3 distinct values; a curve needs at least 4. Use a straight line or a factor.');
  });
});
