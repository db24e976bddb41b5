import { negativeBinomial } from "@shared/engine/family/negative-binomial";
import { estimateTheta } from "@shared/engine/family/negative-binomial-theta";
import { quasiPoisson } from "@shared/engine/family/quasi-poisson";
import { binomial } from "@shared/engine/family/binomial";
import { describe, expect, it } from "vitest";
import { seededUniform } from "../support/generator";
import { negativeBinomialDraw } from "../support/draws";

const response = Float64Array.of(4, 0, 9, 13, 2, 5, 31, 1, 0, 8, 17, 6);
const mean = Float64Array.of(5, 2, 7, 10, 3, 6, 18, 2, 1, 7, 12, 6.5);
const ones = new Float64Array(12).fill(1);
const weights = Float64Array.of(1, 1, 2, 1, 1, 0.5, 1, 1, 3, 1, 1, 1);

describe("Theta", () => {
  it("is the root of the likelihood's slope, as R 4.2.2's uniroot finds it", () => {
    expect(Math.abs(estimateTheta({ response, mean, weights: ones, start: 1 }) / 17.2749797282 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(estimateTheta({ response, mean, weights, start: 1 }) / 17.6164994832 - 1)).toBeLessThan(1e-9);
  });

  it("is the same from any start", () => {
    const from = (start: number) => estimateTheta({ response, mean, weights, start });
    for (const start of [1e-3, 0.05, 17, 400, 1e7, 1e12, 0, Number.NaN]) expect(Math.abs(from(start) / from(1) - 1)).toBeLessThan(1e-9);
  });

  it("maximises the family's likelihood", () => {
    const at = (theta: number) => negativeBinomial.logLikelihood?.({ response, linearPredictor: mean.map(Math.log), weights, theta }) ?? Number.NaN;
    const theta = estimateTheta({ response, mean, weights, start: 1 });
    expect(at(theta)).toBeGreaterThan(at(theta * 1.01));
    expect(at(theta)).toBeGreaterThan(at(theta / 1.01));
  });

  it("doubles no weight: rows twice are rows of weight two", () => {
    const twice = (values: Float64Array) => Float64Array.from([...values, ...values]);
    const doubled = estimateTheta({ response: twice(response), mean: twice(mean), weights: twice(ones), start: 1 });
    const weighted = estimateTheta({ response, mean, weights: new Float64Array(12).fill(2), start: 1 });
    expect(Math.abs(doubled / weighted - 1)).toBeLessThan(1e-9);
  });

  it("goes to its upper bound where counts scatter no more than Poisson's", () => {
    expect(estimateTheta({ response: mean.map(Math.round), mean, weights: ones, start: 1 })).toBeCloseTo(1e7, 2);
  });

  it("goes to its lower bound, and stays finite, where means are absurd", () => {
    const theta = estimateTheta({ response: Float64Array.of(0, 0, 1e6), mean: Float64Array.of(1e130, 1e-130, 1), weights: Float64Array.of(1, 1, 1), start: 1 });
    expect(theta).toBeGreaterThanOrEqual(1e-3 * (1 - 1e-12));
    expect(theta).toBeLessThan(1);
  });

  it.each([0.5, 3, 40])("of %d is found again in 20,000 draws, within four standard errors", (theta) => {
    const uniform = seededUniform(31);
    const means = Float64Array.from({ length: 20_000 }, () => 5 + 40 * uniform());
    const draws = means.map((mu) => negativeBinomialDraw(uniform, mu, theta));
    const found = estimateTheta({ response: draws, mean: means, weights: new Float64Array(20_000).fill(1), start: 1 });
    // Of ln theta about sqrt(2 / n) x (1 + theta / mean) for moderate theta (Lawless 1987, section 2).
    expect(Math.abs(Math.log(found / theta))).toBeLessThan(4 * Math.sqrt(2 / 20_000) * (1 + theta / 12) * 1.5);
  });

  it("is the same by tables of counts, for many rows, as row by row, for few or fractional ones", () => {
    const many = (values: Float64Array) => Float64Array.from({ length: 48 }, (_, k) => values[k % 12]);
    const tabled = estimateTheta({ response: many(response), mean: many(mean), weights: many(weights), start: 1 });
    const plain = estimateTheta({ response, mean, weights, start: 1 });
    const shifted = estimateTheta({ response: many(response).map((units) => units + 1e-12), mean: many(mean), weights: many(weights), start: 1 });
    expect(Math.abs(tabled / plain - 1)).toBeLessThan(1e-9);
    expect(Math.abs(tabled / shifted - 1)).toBeLessThan(1e-9);
  });

  it("belongs to the negative binomial alone", () => {
    expect(quasiPoisson.estimateTheta).toBe(null);
    expect(binomial.estimateTheta).toBe(null);
  });
});

describe("The mean of nothing but intercept and offset", () => {
  const counts = Float64Array.of(3, 8, 1, 12, 0, 6);
  const offset = Float64Array.of(1, 2, 1, 4, 0.5, 2).map(Math.log);
  const prior = Float64Array.of(1, 2, 1, 1, 1, 3);

  it("of the negative binomial solves sum(w (y - m) / (1 + m / theta)) = 0: R's uniroot", () => {
    const means = negativeBinomial.nullMean({ response: counts, offset, weights: prior, theta: 2.2 });
    means.forEach((value, row) => expect(Math.log(value) - offset[row]).toBeCloseTo(1.04903693931715, 10));
  });

  it("of quasi-Poisson is glm(y ~ 1 + offset(o), quasipoisson, weights = w)'s", () => {
    const means = quasiPoisson.nullMean({ response: counts, offset, weights: prior, theta: 1 });
    means.forEach((value, row) => expect(Math.log(value) - offset[row]).toBeCloseTo(1.10866262452161, 10));
  });

  it("of the binomial is glm(share ~ 1 + offset(o), binomial, weights = trials)'s", () => {
    const shift = Float64Array.of(0.1, -0.3, 0.5, 0, 1, -1);
    const rows = { response: Float64Array.of(0.3, 0, 1, 0.48, 1, 1 / 3), offset: shift, weights: Float64Array.of(10, 4, 1, 25, 8, 3), theta: 1 };
    binomial.nullMean(rows).forEach((value, row) => expect(Math.log(value / (1 - value)) - shift[row]).toBeCloseTo(-0.142528956189639, 10));
  });

  it("without an offset is the weighted mean", () => {
    const none = new Float64Array(6);
    const average = counts.reduce((sum, value, row) => sum + value * prior[row], 0) / 9;
    negativeBinomial.nullMean({ response: counts, offset: none, weights: prior, theta: 0.3 }).forEach((value) => expect(value).toBeCloseTo(average, 11));
    const shares = Float64Array.of(0.2, 0.9, 0.4, 1, 0, 0.5);
    const share = shares.reduce((sum, value, row) => sum + value * prior[row], 0) / 9;
    binomial.nullMean({ response: shares, offset: none, weights: prior, theta: 1 }).forEach((value) => expect(value).toBeCloseTo(share, 11));
  });

  it("stays finite where all shares are the same end, or the offsets are far apart", () => {
    const far = Float64Array.of(-40, 40, 0, 10, -10, 3);
    for (const share of [0, 1]) {
      const rows = { response: new Float64Array(6).fill(share), offset: far, weights: prior, theta: 1 };
      expect(binomial.nullMean(rows).every((value) => value > 0 && value <= 1)).toBe(true);
    }
    expect(negativeBinomial.nullMean({ response: counts, offset: far, weights: prior, theta: 1 }).every(Number.isFinite)).toBe(true);
  });
});
