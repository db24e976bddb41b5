import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { knotSplineRows, knotSplineSlopeRows, writeKnotSplines } from "@shared/engine/basis/knot-spline";
import { largestDifference } from "../support/measures";
import { someCoefficients, valuesOf } from "./term-values";

const runs = { numRuns: 60, seed: 20260103 };
/** Two to nine ascending knots, steps of 0.1 to 10. */
const knotsOf = fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 1, maxLength: 8 }).map((steps) => {
  let knot = -3;
  return Float64Array.from([0, ...steps], (step) => (knot += step / 10));
});
const fractions = fc.array(fc.double({ min: -0.5, max: 1.5, noNaN: true }), { minLength: 5, maxLength: 20 });
const within = (knots: Float64Array, shares: readonly number[]): Float64Array =>
  Float64Array.from(shares, (share) => knots[0] + share * (knots[knots.length - 1] - knots[0]));
const curveValues = (knots: Float64Array, x: Float64Array) =>
  valuesOf(knotSplineRows(x, knots), someCoefficients(knots.length + 2), x.length);

describe("Cubic B-splines on knots of any spacing", () => {
  it("sum to one in every row and stay within their columns, inside and outside the knots", () => {
    fc.assert(fc.property(knotsOf, fractions, (knots, shares) => {
      const x = within(knots, shares);
      const rows = knotSplineRows(x, knots);
      expect(rows.width).toBe(knots.length + 2);
      for (let row = 0; row < x.length; row++) {
        const sum = rows.values.subarray(4 * row, 4 * row + 4).reduce((total, value) => total + value, 0);
        // Rounding of four values of a size below 10.
        expect(Math.abs(sum - 1)).toBeLessThan(1e-12);
        expect(rows.first[row]).toBeGreaterThanOrEqual(0);
        expect(rows.first[row]).toBeLessThanOrEqual(knots.length - 2);
      }
    }), runs);
  });

  it("are never negative between the knots, and 1, 0, 0, 0 at the first", () => {
    fc.assert(fc.property(knotsOf, fc.double({ min: 0, max: 1, noNaN: true }), (knots, share) => {
      expect(Math.min(...knotSplineRows(within(knots, [share]), knots).values)).toBeGreaterThan(-1e-14);
      expect(largestDifference(knotSplineRows(within(knots, [0]), knots).values, [1, 0, 0, 0])).toBeLessThan(1e-15);
    }), runs);
  });

  it("make up x itself from the middles of their knots (Marsden's identity)", () => {
    fc.assert(fc.property(knotsOf, fractions, (knots, shares) => {
      const x = within(knots, shares);
      const at = (position: number) => knots[Math.min(Math.max(position, 0), knots.length - 1)];
      const middles = Float64Array.from({ length: knots.length + 2 }, (_, k) => (at(k - 2) + at(k - 1) + at(k)) / 3);
      // x is below 200.
      expect(largestDifference(valuesOf(knotSplineRows(x, knots), middles, x.length), x)).toBeLessThan(1e-11);
    }), runs);
  });

  it("have as derivatives what differences of their values come to", () => {
    const knots = Float64Array.of(0, 0.4, 1, 3, 4);
    const x = Float64Array.of(-2, -0.5, 0.2, 0.7, 1.6, 2.9, 3.3, 4.5);
    const step = 1e-5;
    const above = curveValues(knots, x.map((value) => value + step));
    const below = curveValues(knots, x.map((value) => value - step));
    const slopes = valuesOf(knotSplineSlopeRows(x, knots), someCoefficients(7), x.length);
    // Central differences err by step^2 x third derivative / 6, here under 100, and rounding / step.
    expect(largestDifference(slopes, slopes.map((_, k) => (above[k] - below[k]) / (2 * step)))).toBeLessThan(1e-7);
  });

  it("have as second derivatives what differences of their first come to", () => {
    const knots = Float64Array.of(0, 0.4, 1, 3);
    const step = 1e-6;
    for (const [interval, x] of [[0, 0.1], [1, 0.7], [2, 2.2]]) {
      const out = new Float64Array(12);
      writeKnotSplines(knots, interval, { x, order: 2, out, start: 0 });
      writeKnotSplines(knots, interval, { x: x + step, order: 1, out, start: 4 });
      writeKnotSplines(knots, interval, { x: x - step, order: 1, out, start: 8 });
      const differences = [0, 1, 2, 3].map((k) => (out[4 + k] - out[8 + k]) / (2 * step));
      // First derivatives are quadratic between knots, so only rounding / step is left.
      expect(largestDifference(out.subarray(0, 4), differences)).toBeLessThan(1e-7);
    }
  });

  it("go on as straight lines beyond the boundary knots", () => {
    fc.assert(fc.property(knotsOf, (knots) => {
      const x = within(knots, [1, 1.25, 1.5, 0, -0.25, -0.5]);
      const [a, b, c, d, e, f] = curveValues(knots, x);
      const size = Math.max(1, ...[a, b, c, d, e, f].map(Math.abs));
      // Relative to the largest of the values.
      expect(Math.abs(a - 2 * b + c) / size).toBeLessThan(1e-11);
      expect(Math.abs(d - 2 * e + f) / size).toBeLessThan(1e-11);
    }), runs);
  });
});
