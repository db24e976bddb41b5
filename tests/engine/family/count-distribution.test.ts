import { amountAtMost, countAtMost, countLogDensity, countSize, logTailBound } from "@shared/engine/family/count-distribution";
import { countPlace } from "@shared/engine/family/count-place";
import { describe, expect, it } from "vitest";

describe("The distribution of counts", () => {
  /** Count, mean, variance over mean and R 4.2.2's pnbinom(count, size = mean / (ratio - 1), mu = mean), ppois for ratio 1. */
  const values: [number, number, number, number][] = [
    [3, 2, 2.5, 0.805574887702698], [40, 55, 1.8, 0.0645189207213354], [900, 1000, 4, 0.0544907303097208], [1000, 1000, 1, 0.508409367168506],
  ];

  it.each(values)("at %d with mean %d and ratio %d is R's", (count, mean, ratio, expected) => {
    expect(Math.abs(countAtMost(count, mean, ratio) - expected)).toBeLessThan(1e-12);
  });

  it("has nothing below zero", () => {
    expect(countAtMost(-1, 3, 2)).toBe(0);
    expect(countAtMost(-1, 3, 1)).toBe(0);
  });

  /** Count, mean, size and R 4.2.2's dnbinom(count, size, mu = mean, log = TRUE). */
  const densities: [number, number, number, number][] = [
    [0, 2, 3, -1.53247687129797], [7, 4.2, 0.5, -3.47086279585619], [120, 100, 9, -4.79994568976841],
    [300, 310, 1e4, -3.94408911591787], [300, 310, 1e7, -3.93417070123883], [5000, 5100, 2.5, -9.0118858982774],
  ];

  it.each(densities)("has at %d, mean %d and size %d R's log density", (count, mean, size, expected) => {
    expect(Math.abs(countLogDensity(count, mean, size) / expected - 1)).toBeLessThan(2e-11);
  });

  it("has Poisson's log density for infinite size: R 4.2.2's dpois(12, 9.5, log = TRUE)", () => {
    expect(countLogDensity(12, 9.5, Infinity)).toBeCloseTo(-2.47171291238394, 12);
    expect(countLogDensity(12, 9.5, 1e13)).toBeCloseTo(-2.47171291238394, 11);
  });

  it("has densities that sum to its probabilities", () => {
    for (const ratio of [0.5, 1, 1 + 5e-7, 1.4, 6]) {
      const size = countSize(7, ratio);
      let sum = 0;
      for (let count = 0; count < 40; count++) {
        sum += Math.exp(countLogDensity(count, 7, size));
        expect(Math.abs(sum - countAtMost(count, 7, ratio))).toBeLessThan(1e-7 * (ratio === 1 + 5e-7 ? 1 : 1e-5));
      }
    }
  });

  it("has a size of mean / (ratio - 1), infinite where the ratio is one or less", () => {
    expect(countSize(6, 3)).toBe(3);
    expect(countSize(6, 1)).toBe(Infinity);
    expect(countSize(6, 0.2)).toBe(Infinity);
  });

  it("stays under Chernoff's bound on both sides", () => {
    for (const ratio of [1, 3]) {
      const size = countSize(20, ratio);
      for (let count = 0; count <= 80; count++) {
        const tail = count <= 20 ? countAtMost(count, 20, ratio) : 1 - countAtMost(count - 1, 20, ratio);
        expect(tail).toBeLessThanOrEqual(Math.exp(logTailBound(count, 20, size)) * (1 + 1e-9) + 1e-15);
      }
    }
  });
});

describe("The distribution of amounts", () => {
  it("is the gamma's: with variance over mean equal to the mean it is exponential", () => {
    for (const x of [0.1, 1, 2.5, 9]) expect(amountAtMost(x, 2, 2)).toBeCloseTo(1 - Math.exp(-x / 2), 13);
  });

  it("is all at the mean where nothing scatters", () => {
    expect(amountAtMost(1.999, 2, 1e-20)).toBe(0);
    expect(amountAtMost(2, 2, 1e-20)).toBe(1);
    expect(amountAtMost(0, 2, 1)).toBe(0);
  });
});

describe("A response's place", () => {
  it("of a count is between the probabilities below it and at most it", () => {
    const { below, atMost } = countPlace({ response: 2, mean: 1.5, ratio: 1, fractional: false });
    expect(below).toBeCloseTo(Math.exp(-1.5) * 2.5, 13);
    expect(atMost - below).toBeCloseTo((Math.exp(-1.5) * 1.5 ** 2) / 2, 13);
  });

  it("of an amount is a single probability, but for zero, which stands for all that rounds to it", () => {
    const one = countPlace({ response: 1, mean: 2, ratio: 2, fractional: true });
    expect(one.atMost).toBeCloseTo(1 - Math.exp(-0.5), 14);
    expect(one.below).toBe(one.atMost);
    const zero = countPlace({ response: 0, mean: 2, ratio: 2, fractional: true });
    expect(zero.below).toBe(0);
    expect(zero.atMost).toBeCloseTo(0.00025, 7);
  });

  it("of an amount among whole units has no width", () => {
    const { below, atMost } = countPlace({ response: 2.5, mean: 1.5, ratio: 1, fractional: false });
    expect(below).toBe(atMost);
    expect(atMost).toBe(countAtMost(2, 1.5, 1));
  });
});
