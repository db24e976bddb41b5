import { countInterval } from "@shared/engine/family/count-interval";
import { normalQuantile } from "@shared/engine/predict/level";
import { performance } from "node:perf_hooks";
import { describe, expect, it } from "vitest";
import { seededUniform } from "../support/generator";
import { plainCountInterval } from "./plain-count-interval";

const row = (linearPredictor: number, standardError: number, level: number, fractional = false) =>
  ({ linearPredictor, standardError, level, quantile: normalQuantile(level), fractional });

/**
 * Predictors from 0.1 to 3,000 units, standard errors up to 0.3 (one in ten: 0.6) and at most ten times the noise, ratios from
 * 0.5 to 9.
 */
function randomRows(count: number, seed: number, fractional: boolean) {
  const uniform = seededUniform(seed);
  return Array.from({ length: count }, () => {
    const linearPredictor = -2 + 10 * uniform() ** 2;
    const ratio = 0.5 + 8.5 * uniform() ** 2;
    const standardError = Math.min(uniform() ** 2 * 0.3 * (uniform() < 0.1 ? 2 : 1), 10 * Math.sqrt(ratio * Math.exp(-linearPredictor)));
    return { row: row(linearPredictor, standardError, [0.5, 0.8, 0.95, 0.99][Math.floor(4 * uniform())], fractional), ratio };
  });
}

describe("The interval of a new count", () => {
  it("has the ends that plain bisection finds, to the whole number, whatever the mean, error, dispersion and level", () => {
    for (const { row: own, ratio } of randomRows(100, 11, false)) {
      expect({ own, ratio, ...countInterval(own, () => ratio) }).toEqual({ own, ratio, ...plainCountInterval(own, () => ratio) });
    }
  });

  it("does so for the negative binomial's variance, too", () => {
    for (const { row: own, ratio } of randomRows(50, 12, false)) {
      const ratioOf = (mean: number) => 1 + mean / (ratio * ratio);
      expect({ own, ratio, ...countInterval(own, ratioOf) }).toEqual({ own, ratio, ...plainCountInterval(own, ratioOf) });
    }
  });

  it("has for amounts the ends of plain bisection, to 1e-8 of themselves (or 1e-12)", () => {
    for (const { row: own, ratio } of randomRows(50, 13, true)) {
      const [found, plain] = [countInterval(own, () => ratio), plainCountInterval(own, () => ratio)];
      for (const end of ["lower", "upper"] as const) {
        expect(Math.abs(found[end] - plain[end])).toBeLessThanOrEqual(1e-8 * plain[end] + 1e-12);
      }
    }
  });

  it("is within a thousandth where the uncertainty dwarfs the noise and a lognormal serves", () => {
    for (const fractional of [false, true]) {
      for (const [predictor, error, ratio] of [[9, 0.35, 0.7], [10, 0.3, 2], [8, 0.5, 1]]) {
        const own = row(predictor, error, 0.95, fractional);
        const [found, plain] = [countInterval(own, () => ratio), plainCountInterval(own, () => ratio, 2001)];
        expect(Math.abs(found.lower / plain.lower - 1)).toBeLessThan(1e-3);
        expect(Math.abs(found.upper / plain.upper - 1)).toBeLessThan(1e-3);
        expect(Number.isInteger(found.lower) && Number.isInteger(found.upper)).toBe(!fractional);
      }
    }
  });

  /**
   * Predictor, standard error, ratio, level and both ends: R 4.2.2, integrate() of pnbinom (ppois) over the normal predictor, then
   * bisection over whole numbers.
   */
  const counts: [number, number, number, number, number, number][] = [
    [3, 0.1, 2, 0.8, 12, 29], [1, 0.3, 3, 0.95, 0, 11], [6, 0.05, 1.5, 0.95, 344, 468], [8, 0.02, 1, 0.9, 2850, 3116], [7.5, 0.3, 6, 0.8, 1218, 2668],
  ];

  it.each(counts)("at predictor %d, error %d, ratio %d and level %d is R's integral's", (predictor, error, ratio, level, lower, upper) => {
    expect(countInterval(row(predictor, error, level), () => ratio)).toEqual({ lower, upper });
  });

  it("of size 2 and 10 at predictors 3 and 5 is R's integral's", () => {
    expect(countInterval(row(3, 0.1, 0.8), (mean) => 1 + mean / 2)).toEqual({ lower: 5, upper: 40 });
    expect(countInterval(row(5, 0.05, 0.95), (mean) => 1 + mean / 10)).toEqual({ lower: 68, upper: 259 });
  });

  /** As above, with pgamma and uniroot. */
  const amounts: [number, number, number, number, number, number][] = [
    [1, 0.2, 2, 0.8, 0.432779801578, 5.98399814714], [4, 0.05, 3, 0.95, 32.027669944, 83.1090552503], [8, 0.1, 2, 0.8, 2609.81707069, 3401.17784522],
  ];

  it.each(amounts)("of amounts at predictor %d, error %d, ratio %d and level %d is R's integral's to 1e-9", (predictor, error, ratio, level, lower, upper) => {
    const found = countInterval(row(predictor, error, level, true), () => ratio);
    expect(Math.abs(found.lower / lower - 1)).toBeLessThan(1e-9);
    expect(Math.abs(found.upper / upper - 1)).toBeLessThan(1e-9);
  });

  it("holds the level's probability, and no more than it needs", () => {
    const found = countInterval(row(2, 0, 0.9), () => 1);
    const poisson = plainCountInterval(row(2, 0, 0.9), () => 1);
    expect(found).toEqual(poisson);
    expect(found).toEqual({ lower: 3, upper: 12 });
  });

  it("is ordered and finite, and never narrower for a higher level", () => {
    for (const { row: own, ratio } of randomRows(200, 14, false)) {
      const width = (level: number) => {
        const { lower, upper } = countInterval({ ...own, level, quantile: normalQuantile(level) }, () => ratio);
        expect(Number.isFinite(lower) && Number.isFinite(upper) && lower >= 0 && lower <= upper).toBe(true);
        return upper - lower;
      };
      const widths = [0.5, 0.8, 0.95, 0.99].map(width);
      expect(widths).toEqual([...widths].sort((left, right) => left - right));
    }
  });

  it("is wider for a larger error or ratio at means where the tails are not cut off at zero", () => {
    const width = (error: number, ratio: number) => {
      const { lower, upper } = countInterval(row(6, error, 0.9), () => ratio);
      return upper - lower;
    };
    expect(width(0.05, 2)).toBeGreaterThan(width(0.02, 2));
    expect(width(0.2, 2)).toBeGreaterThan(width(0.05, 2));
    expect(width(0.05, 5)).toBeGreaterThan(width(0.05, 2));
  });

  it("stays finite and ordered at the ends of reason", () => {
    const extremes = [[-300, 0, 1], [-300, 9, 5], [300, 0.1, 2], [20, 9.9, 1e8], [0, 0, 1e-30], [15, 0, 1e-20], [3, 400, 2], [5, 0.1, 1e6], [25, 0.01, 3]];
    for (const fractional of [false, true]) {
      for (const [predictor, error, ratio] of extremes) {
        const { lower, upper } = countInterval(row(predictor, error, 0.95, fractional), () => ratio);
        expect({ predictor, error, ratio, fractional, ok: Number.isFinite(lower) && Number.isFinite(upper) && lower >= 0 && lower <= upper })
          .toEqual({ predictor, error, ratio, fractional, ok: true });
      }
    }
  });

  it("is at least ten times as quick as plain bisection of the same precision", () => {
    for (const fractional of [false, true]) {
      const rows = randomRows(40, 15, fractional);
      const time = (find: typeof countInterval | typeof plainCountInterval) => {
        const start = performance.now();
        for (const { row: own, ratio } of rows) {
          if (find === plainCountInterval) plainCountInterval(own, () => ratio, 101);
          else countInterval(own, () => ratio);
        }
        return performance.now() - start;
      };
      for (let turn = 0; turn < 10; turn++) time(countInterval);
      // The best of three, as what else the machine does only adds.
      const [quick, slow] = [countInterval, plainCountInterval].map((find) => Math.min(time(find), time(find), time(find)));
      expect(slow / quick).toBeGreaterThan(10);
    }
  });
});
