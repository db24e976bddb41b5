import { describe, expect, it } from "vitest";
import { products } from "../../demo/chain/products";
import { generateDemo } from "../../demo/generate";
import { sharedSpread, trueNoise } from "../../demo/truth/noise";
import { residualsByStore } from "./residuals";

const demo = generateDemo();
const residuals = new Map(products.map(({ code }) => [code, [...residualsByStore(demo, code).values()]]));

const average = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
const weekCount = 156;
const weeks = Array.from({ length: weekCount }, (_, week) => week);

/** Each week's mean residual over stores, for one product. */
const weekMeans = (product: string) =>
  weeks.map((week) => average((residuals.get(product) ?? []).map((store) => store[week])));

function covariance(one: number[], other: number[]): number {
  const meanOne = average(one);
  const meanOther = average(other);
  return average(one.map((value, index) => (value - meanOne) * (other[index] - meanOther)));
}

/** exp(x) - 1 for normal x with a covariance c has this covariance, up to the common factor of the mean. */
const lognormalCovariance = (logCovariance: number) => Math.expm1(logCovariance);

describe("The noise in the demo's sales", () => {
  it("is nothing on average: the truth explains the level of every product", () => {
    for (const { code } of products) {
      const mean = average((residuals.get(code) ?? []).flat());
      // Standard error of a three-year mean: shocks of 0.053 over 156 weeks, four of them; lognormal means add 0.5 %.
      expect(Math.abs(mean), code).toBeLessThan(0.026);
    }
  });

  it("has shocks that all stores share in a week, as strong as the truth says", () => {
    const shared = products.map(({ code }) => {
      const stores = residuals.get(code) ?? [];
      const pairs = stores.flatMap((one, index) => stores.slice(index + 1).map((other) => covariance(one, other)));
      return average(pairs);
    });
    const expected = lognormalCovariance(sharedSpread ** 2);
    // A variance of 156 weeks has a relative error of 0.11; of 18 products in 6 categories about 0.035. Three of them.
    expect(average(shared) / expected).toBeGreaterThan(0.89);
    expect(average(shared) / expected).toBeLessThan(1.11);
  });

  it("has part of that in common within a category, and nothing across categories", () => {
    const pairs = products.flatMap((one, index) => products.slice(index + 1).map((other) => ({ one, other })));
    const measured = pairs.map(({ one, other }) => ({
      together: one.category === other.category,
      covariance: covariance(weekMeans(one.code), weekMeans(other.code)),
    }));
    const within = average(measured.filter(({ together }) => together).map((pair) => pair.covariance));
    const across = average(measured.filter(({ together }) => !together).map((pair) => pair.covariance));
    // Relative error of 18 pairs in 6 categories: about 0.1; three of them.
    expect(within / trueNoise.categoryWeekSpread ** 2).toBeGreaterThan(0.7);
    expect(within / trueNoise.categoryWeekSpread ** 2).toBeLessThan(1.3);
    expect(Math.abs(across)).toBeLessThan(0.1 * trueNoise.categoryWeekSpread ** 2);
  });

  it("persists within a store from week to week, as strongly as the truth says", () => {
    const at = (lag: number) =>
      average(products.flatMap(({ code }) => {
        const means = weekMeans(code);
        return (residuals.get(code) ?? []).map((store) => {
          // The truth says that the mean is nothing; taking a series' own mean away would bias its covariances.
          const own = store.map((value, week) => value - means[week]);
          return average(own.slice(lag).map((value, week) => value * own[week]));
        });
      }));
    // Taking the mean of 24 stores away leaves 23 / 24 of what each has of its own.
    const expected = (lag: number) =>
      (23 / 24) * lognormalCovariance(trueNoise.persistentSpread ** 2 * trueNoise.persistence ** lag);
    for (const lag of [1, 2, 3]) {
      // 432 series of 156 weeks with own variances of 0.01 to 0.04: an error of 1e-4 whatever the lag; three of them.
      expect(Math.abs(at(lag) - expected(lag))).toBeLessThan(3e-4);
    }
  });
});
