import { describe, expect, it } from "vitest";
import { createRandom } from "../../demo/random";

const draws = (count: number, draw: () => number) => Array.from({ length: count }, draw);

function moments(values: number[]) {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length;
  return { mean, variance };
}

const count = 40_000;

describe("Seeded draws", () => {
  it("are the same for the same seed and stream", () => {
    const one = createRandom(3, "weather");
    const other = createRandom(3, "weather");
    expect(draws(50, one.uniform)).toEqual(draws(50, other.uniform));
  });

  it("differ between seeds and between streams, without correlation", () => {
    const first = draws(count, createRandom(3, "weather").normal);
    for (const other of [createRandom(4, "weather"), createRandom(3, "offers")]) {
      const second = draws(count, other.normal);
      const product = first.reduce((sum, value, index) => sum + value * second[index], 0) / count;
      // Four standard errors of a correlation of nothing.
      expect(Math.abs(product)).toBeLessThan(4 / Math.sqrt(count));
    }
  });

  it("keep to [0, 1) and spread evenly when uniform", () => {
    const values = draws(count, createRandom(1, "uniform").uniform);
    expect(Math.min(...values)).toBeGreaterThanOrEqual(0);
    expect(Math.max(...values)).toBeLessThan(1);
    const tenths = new Array<number>(10).fill(0);
    for (const value of values) tenths[Math.floor(value * 10)] += 1;
    const chiSquare = tenths.reduce((sum, seen) => sum + (seen - count / 10) ** 2 / (count / 10), 0);
    // The 99.9 % point of chi-square with 9 degrees of freedom.
    expect(chiSquare).toBeLessThan(27.9);
  });

  it("have mean 0 and variance 1 when normal", () => {
    const { mean, variance } = moments(draws(count, createRandom(1, "normal").normal));
    expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(count));
    expect(Math.abs(variance - 1)).toBeLessThan(4 * Math.sqrt(2 / count));
  });

  it.each([0.4, 1, 7.5])("have mean and variance %d when gamma of that shape", (shape) => {
    const random = createRandom(1, `gamma ${shape}`);
    const { mean, variance } = moments(draws(count, () => random.gamma(shape)));
    expect(Math.abs(mean - shape)).toBeLessThan(4 * Math.sqrt(shape / count));
    expect(Math.abs(variance / shape - 1)).toBeLessThan(4 * Math.sqrt((2 + 6 / shape) / count));
  });

  it.each([0.2, 12, 480, 1300])("have mean and variance %d when Poisson of that mean", (poissonMean) => {
    const random = createRandom(1, `poisson ${poissonMean}`);
    const { mean, variance } = moments(draws(count, () => random.poisson(poissonMean)));
    expect(Math.abs(mean - poissonMean)).toBeLessThan(4 * Math.sqrt(poissonMean / count));
    expect(Math.abs(variance / poissonMean - 1)).toBeLessThan(4 * Math.sqrt((2 + 1 / poissonMean) / count));
  });

  it("count nothing where a Poisson mean is 0", () => {
    expect(createRandom(1, "zero").poisson(0)).toBe(0);
  });

  it("choose in proportion to weight, and never what weighs nothing", () => {
    const random = createRandom(1, "choices");
    const chosen = Array.from({ length: count }, () => random.choose([["never", 0], ["seldom", 1], ["often", 3]]));
    expect(chosen).not.toContain("never");
    const share = chosen.filter((choice) => choice === "often").length / count;
    expect(Math.abs(share - 0.75)).toBeLessThan(4 * Math.sqrt((0.75 * 0.25) / count));
  });

  it("reach both ends of a range of whole numbers", () => {
    const random = createRandom(1, "between");
    expect([...new Set(draws(200, () => random.between(2, 4)))].sort()).toEqual([2, 3, 4]);
  });

  it("refuse what has no distribution, naming the value", () => {
    const random = createRandom(1, "refusals");
    expect(() => random.gamma(0)).toThrow("A gamma draw needs a shape above 0, not 0.");
    expect(() => random.poisson(-1)).toThrow("A Poisson draw needs a mean of 0 or more, not -1.");
    expect(() => random.poisson(Number.NaN)).toThrow("A Poisson draw needs a mean of 0 or more, not NaN.");
    expect(() => random.choose([])).toThrow("There is nothing to choose from");
  });
});
