import { fitModel, predict } from "@shared/engine";
import type { Family, ModelData, ModelSpec } from "@shared/engine";
import { countInterval } from "@shared/engine/family/count-interval";
import { describe, expect, it } from "vitest";
import { normalQuantile } from "@shared/engine/predict/level";
import { simulatedSales, simulatedSpec } from "../support/simulated-sales";

const line: ModelSpec["terms"] = [{ kind: "linear", column: "x" }];
const spec = (family: Family, change: Partial<ModelSpec> = {}): ModelSpec => ({ response: "y", family, terms: line, ...change });

describe("A binomial model", () => {
  const { data } = simulatedSales("binomial", { seed: 21, count: 200, shape: "gentle" });
  const model = fitModel(simulatedSpec("binomial"), data);

  it("predicts shares, their interval through the logit, and stays from 0 to 1", () => {
    const { mean, lower, upper, linearPredictor, standardError, median } = predict(model, data, { level: 0.9 });
    const share = (predictor: number) => 1 / (1 + Math.exp(-predictor));
    mean.forEach((value, row) => {
      const half = normalQuantile(0.9) * standardError[row];
      expect(value).toBeCloseTo(share(linearPredictor[row]), 14);
      expect(lower[row]).toBeCloseTo(share(linearPredictor[row] - half), 14);
      expect(upper[row]).toBeCloseTo(share(linearPredictor[row] + half), 14);
    });
    expect(median).toBe(null);
  });

  it("has no interval of a new row, and says so", () => {
    expect(() => predict(model, data, { interval: "observation" })).toThrow(expect.objectContaining({
      code: "option-invalid", message: 'interval is "observation"; for binomial only the interval of the mean exists ("mean").',
    }) as Error);
  });

  it("has a dispersion of 1, no theta, and a likelihood that beats the null model's", () => {
    expect(model.dispersion).toBe(1);
    expect(model.theta).toBe(null);
    expect(model.deviance).toBeLessThan(model.nullDeviance);
    expect(Number.isFinite(model.logLikelihood)).toBe(true);
  });

  it("ends in finite numbers where a column separates all rows", () => {
    const separated = fitModel(spec("binomial"), { y: [0, 0, 0, 0, 1, 1, 1, 1], x: [1, 2, 3, 4, 5, 6, 7, 8] });
    const { mean, standardError } = predict(separated, { x: [1, 4.5, 8] });
    expect(Array.from(mean).every((value) => value > 0 && value < 1)).toBe(true);
    // Halfway, but for the rounding of weights that have all but vanished.
    expect(Math.abs(mean[1] - 0.5)).toBeLessThan(0.05);
    expect(Array.from(standardError).every(Number.isFinite)).toBe(true);
  });

  it("does the same with shares of trials as with a row for each trial", () => {
    const shares = fitModel(spec("binomial", { weights: "n" }), { y: [0.5, 0.25, 1], n: [2, 4, 3], x: [1, 2, 4] });
    const single = fitModel(spec("binomial"), { y: [1, 0, 1, 0, 0, 0, 1, 1, 1], x: [1, 1, 2, 2, 2, 2, 4, 4, 4] });
    shares.coefficients.forEach((value, k) => {
      // The line's column is centred over rows, of which there are more.
      if (k > 0) expect(value).toBeCloseTo(single.coefficients[k], 8);
    });
    expect(predict(shares, { x: [3] }).mean[0]).toBeCloseTo(predict(single, { x: [3] }).mean[0], 8);
  });
});

describe("A negative binomial model", () => {
  const { data } = simulatedSales("negative-binomial", { seed: 22, count: 400, shape: "threshold" });
  const model = fitModel(simulatedSpec("negative-binomial"), data);

  it("finds theta, with a dispersion of 1", () => {
    expect(model.dispersion).toBe(1);
    // Drawn with theta 5; its logarithm's standard error is about sqrt(2 / n) times a few.
    expect(Math.abs(Math.log((model.theta ?? 0) / 5))).toBeLessThan(0.4);
  });

  it("predicts new counts by the negative binomial of size theta, the coefficients' uncertainty mixed in", () => {
    const { lower, upper, linearPredictor, standardError, median } = predict(model, data, { level: 0.8, interval: "observation" });
    for (let row = 0; row < 50; row++) {
      const own = { linearPredictor: linearPredictor[row], standardError: standardError[row], level: 0.8, quantile: normalQuantile(0.8), fractional: false };
      const expected = countInterval(own, (mean) => 1 + mean / (model.theta ?? Number.NaN));
      expect({ lower: lower[row], upper: upper[row] }).toEqual(expected);
    }
    expect(median).toBe(null);
  });

  it("is quasi-Poisson's fit, with dispersion 1, where counts scatter less than Poisson's", () => {
    const even = { y: [3, 4, 5, 6, 7, 8, 9, 10], x: [1, 2, 3, 4, 5, 6, 7, 8] };
    const [counts, quasi] = (["negative-binomial", "quasi-poisson"] as const).map((family) => fitModel(spec(family), even));
    expect(counts.theta).toBeGreaterThan(1e6);
    counts.coefficients.forEach((value, k) => expect(value).toBeCloseTo(quasi.coefficients[k], 6));
  });

  it("multiplies means where an offset is added", () => {
    const shifted = { ...data, logExposure: data.logExposure.map((value) => value + 1) };
    const other = fitModel(simulatedSpec("negative-binomial"), shifted);
    expect(other.coefficients[0]).toBeCloseTo(model.coefficients[0] - 1, 6);
    expect(other.deviance).toBeCloseTo(model.deviance, 5);
  });
});

describe("Every family refuses responses it cannot have", () => {
  const x = [1, 2, 3, 4];
  const cases: [Family, ModelData, string][] = [
    ["binomial", { y: [0, 0.5, 1.2, 1], x }, 'Response "y" must be from 0 to 1 for binomial; row 3 is 1.2.'],
    ["binomial", { y: [0, -0.5, 1, 1], x }, 'Response "y" must be from 0 to 1 for binomial; row 2 is -0.5.'],
    ["negative-binomial", { y: [3, 2, -1, 1], x }, 'Response "y" must not be negative for negative-binomial; row 3 is -1.'],
    ["negative-binomial", { y: [0, 0, 0, 0], x }, 'Response "y" is 0 in every row; negative-binomial needs a value above 0.'],
    ["quasi-poisson", { y: [3, -2, 1, 1], x }, 'Response "y" must not be negative for quasi-poisson; row 2 is -2.'],
    ["quasi-poisson", { y: [0, 0, 0, 0], x }, 'Response "y" is 0 in every row; quasi-poisson needs a value above 0.'],
    ["log-gaussian", { y: [3, 2, 0, 1], x }, 'Response "y" must be above 0 for log-gaussian; row 3 is 0.'],
  ];

  it.each(cases)("%s: %j", (family, data, message) => {
    expect(() => fitModel(spec(family), data)).toThrow(expect.objectContaining({ name: "EngineError", code: "response-invalid", message }) as Error);
  });

  it("takes fractional units in count families, for goods sold by weight", () => {
    for (const family of ["quasi-poisson", "negative-binomial"] as const) {
      const model = fitModel(spec(family), { y: [3.2, 2.7, 0, 1.5, 0.4, 2.2], x: [1, 2, 3, 4, 5, 6] });
      const { lower, upper } = predict(model, { x: [2] }, { interval: "observation", level: 0.8 });
      expect(model.fractionalResponse).toBe(true);
      expect(lower[0] > 0 && upper[0] > lower[0] && !Number.isInteger(upper[0])).toBe(true);
    }
  });
});
