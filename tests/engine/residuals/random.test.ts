import { seededRandom } from "@shared/engine/inference/random";
import { describe, expect, it } from "vitest";

const draws = (seed: number, kind: "uniform" | "normal", count: number) => {
  const random = seededRandom(seed);
  return Array.from({ length: count }, () => random[kind]());
};
const average = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;

describe("Seeded draws", () => {
  it("are the same for the same seed, and others for another", () => {
    expect(draws(3, "uniform", 20)).toEqual(draws(3, "uniform", 20));
    expect(draws(3, "normal", 21)).toEqual(draws(3, "normal", 21));
    expect(draws(3, "uniform", 20)).not.toEqual(draws(4, "uniform", 20));
  });

  it("are uniform from 0 to 1: mean and variance within four standard errors", () => {
    const values = draws(1, "uniform", 40_000);
    expect(values.every((value) => value >= 0 && value < 1)).toBe(true);
    expect(Math.abs(average(values) - 0.5)).toBeLessThan(4 * Math.sqrt(1 / 12 / 40_000));
    expect(Math.abs(average(values.map((value) => (value - 0.5) ** 2)) - 1 / 12)).toBeLessThan(4 * Math.sqrt(1 / 180 / 40_000));
  });

  it("are normal: mean, variance, fourth moment and neighbours' product within four standard errors", () => {
    const values = draws(2, "normal", 40_000);
    expect(Math.abs(average(values))).toBeLessThan(4 / 200);
    expect(Math.abs(average(values.map((value) => value ** 2)) - 1)).toBeLessThan((4 * Math.SQRT2) / 200);
    expect(Math.abs(average(values.map((value) => value ** 4)) - 3)).toBeLessThan((4 * Math.sqrt(96)) / 200);
    expect(Math.abs(average(values.slice(1).map((value, k) => value * values[k])))).toBeLessThan(4 / 200);
  });

  it.each([[0.5, "0.5"], [Number.NaN, "NaN"], [2 ** 33, "8589934592"]])("refuse %d for a seed", (seed, shown) => {
    expect(() => seededRandom(seed)).toThrow(`seed is ${shown}; it must be a whole number within 2147483648 of 0.`);
  });
});
