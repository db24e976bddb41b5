import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { logarithmicMean, logarithmicMeanSlopes } from "@shared/planning";

const positive = fc.double({ min: 1e-3, max: 1e6, noNaN: true });

describe("the logarithmic mean", () => {
  it("turns a ratio into the difference it makes", () => {
    expect(logarithmicMean(150, 100) * Math.log(1.5)).toBeCloseTo(50, 12);
    expect(logarithmicMean(1, Math.E)).toBeCloseTo(Math.E - 1, 14);
  });

  it("of equal numbers is the number, and with zero it is zero", () => {
    expect(logarithmicMean(7, 7)).toBe(7);
    expect([logarithmicMean(0, 5), logarithmicMean(5, 0), logarithmicMean(0, 0)]).toEqual([0, 0, 0]);
  });

  it("is symmetric and lies between the geometric and the arithmetic mean", () => {
    fc.assert(
      fc.property(positive, positive, (one, other) => {
        const mean = logarithmicMean(one, other);
        const slack = 1e-14 * (one + other);
        expect(mean).toBeGreaterThanOrEqual(Math.sqrt(one * other) - slack);
        expect(mean).toBeLessThanOrEqual((one + other) / 2 + slack);
        expect(Math.abs(mean - logarithmicMean(other, one))).toBeLessThanOrEqual(slack);
      }),
      { seed: 1, numRuns: 2_000 },
    );
  });

  it("keeps its digits for numbers that nearly agree", () => {
    for (const relative of [1e-3, 1e-6, 1e-9, 1e-12, 2 ** -52]) {
      const one = 100 * (1 + relative);
      const gap = (one - 100) / 100;
      // The series of L(1 + g, 1) = g / log1p(g), to its fourth power.
      const series = 1 + gap / 2 - gap ** 2 / 12 + gap ** 3 / 24 - (19 * gap ** 4) / 720;
      expect(logarithmicMean(one, 100) / 100).toBeCloseTo(series, 14);
    }
  });

  it("works across hundreds of orders of magnitude", () => {
    expect(logarithmicMean(1e-300, 1e-20)).toBeCloseTo(1e-20 / (280 * Math.LN10), 25);
    expect(logarithmicMean(1e-20, 1e-300)).toBeCloseTo(1e-20 / (280 * Math.LN10), 25);
  });
});

describe("slopes of the logarithmic mean", () => {
  it("agree with differences of the mean itself", () => {
    for (const [one, other] of [[150, 100], [100.3, 100], [100, 100.6], [3, 900], [100, 100], [100.0001, 100]]) {
      const step = 1e-5;
      const by = (moveOne: number, moveOther: number) => logarithmicMean(one * Math.exp(moveOne), other * Math.exp(moveOther));
      const { byLogOne, byLogOther } = logarithmicMeanSlopes(one, other);
      // Central differences of step 1e-5 leave about 1e-9 of the value in rounding and truncation.
      expect(byLogOne / ((by(step, 0) - by(-step, 0)) / (2 * step))).toBeCloseTo(1, 8);
      expect(byLogOther / ((by(0, step) - by(0, -step)) / (2 * step))).toBeCloseTo(1, 8);
    }
  });

  it("add up to the mean", () => {
    fc.assert(
      fc.property(positive, positive, (one, other) => {
        const { byLogOne, byLogOther } = logarithmicMeanSlopes(one, other);
        const mean = logarithmicMean(one, other);
        expect(Math.abs(byLogOne + byLogOther - mean)).toBeLessThanOrEqual(1e-12 * mean);
      }),
      { seed: 2, numRuns: 1_000 },
    );
  });

  it("are continuous where the series takes over from the quotient", () => {
    const at = (gap: number) => logarithmicMeanSlopes(100 * Math.exp(gap), 100).byLogOne;
    expect(at(0.004_999_999_99) / at(0.005_000_000_01)).toBeCloseTo(1, 10);
  });
});
