import { describe, expect, it } from "vitest";
import { products } from "../../demo/chain/products";
import { storeShocks, weekShocks } from "../../demo/stages/shocks";
import { sharedSpread, trueNoise } from "../../demo/truth/noise";

const weekCount = 40_000;
const [lemonade, cola] = products;
const icecream = products[3];

const average = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
const covariance = (one: number[], other: number[]) =>
  average(one.map((value, index) => value * other[index])) - average(one) * average(other);

describe("Shocks", () => {
  it("of a week have the spread of the truth, and a category's products share what is the category's", () => {
    const of = (product: typeof lemonade) => weekShocks({ seed: 1, product, weekCount });
    const error = sharedSpread ** 2 / Math.sqrt(weekCount);
    expect(Math.abs(covariance(of(lemonade), of(lemonade)) - sharedSpread ** 2)).toBeLessThan(4 * Math.SQRT2 * error);
    const category = trueNoise.categoryWeekSpread ** 2;
    expect(Math.abs(covariance(of(lemonade), of(cola)) - category)).toBeLessThan(6 * error);
    expect(Math.abs(covariance(of(lemonade), of(icecream)))).toBeLessThan(4 * error);
  });

  it("of a store die away from week to week by the persistence of the truth", () => {
    const shocks = storeShocks({ seed: 1, product: lemonade, store: "S01", weekCount });
    const { persistence, persistentSpread } = trueNoise;
    for (const lag of [0, 1, 2, 4]) {
      const measured = covariance(shocks.slice(lag), shocks.slice(0, weekCount - lag));
      const expected = persistentSpread ** 2 * persistence ** lag;
      // Bartlett's formula: for this persistence, the error of an autocovariance is below twice that of white noise.
      expect(Math.abs(measured - expected)).toBeLessThan((8 * persistentSpread ** 2) / Math.sqrt(weekCount));
    }
  });

  it("of one store say nothing about those of another", () => {
    const of = (store: string) => storeShocks({ seed: 1, product: lemonade, store, weekCount });
    const error = trueNoise.persistentSpread ** 2 / Math.sqrt(weekCount);
    expect(Math.abs(covariance(of("S01"), of("S02")))).toBeLessThan(8 * error);
  });
});
