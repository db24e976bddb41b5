import { fitModel, predict } from "@shared/engine";
import { countInterval } from "@shared/engine/family/count-interval";
import { splineRows } from "@shared/engine/basis/uniform-spline";
import { describe, expect, it } from "vitest";
import {
  expectCoefficients, expectGaussianAgreement, expectIceCreamAgreement, expectQuasiPoissonAgreement, levelAtZero,
} from "./support/agreement";
import { largestDifference, largestRelativeDifference } from "./support/measures";
import { committedReference } from "./support/reference-files";

const additive = committedReference("additive-models");
const regression = committedReference("linear-models");
const splines = committedReference("splines");

describe("Additive models agree with the reference package's", () => {
  it.each(additive.series)("in the normal case: $name", (series) => expectGaussianAgreement(series));
  it.each(additive.series)("in the quasi-Poisson case: $name", (series) => expectQuasiPoissonAgreement(series));
});

describe("Regressions agree with published and certified values", () => {
  it("gives the ice-cream demand regression of Hildreth and Lu", () => expectIceCreamAgreement(regression));

  it("gives NIST's certified coefficients for the Longley data", () => {
    // https://www.itl.nist.gov/div898/strd/lls/data/Longley.shtml, certified to more digits than are compared.
    const certified = {
      estimate: [15.0618722713733, -0.0358191792925910, -2.02022980381683, -1.03322686717359, -0.0511041056535807, 1829.15146461355],
      error: [84.9149257747669, 0.0334910077722432, 0.488399681651699, 0.214274163161675, 0.226073200069370, 455.478499142212],
    };
    const columns = ["deflator", "product", "unemployed", "forces", "population", "year"];
    const model = fitModel(
      { response: "employed", family: "gaussian", terms: columns.map((column) => ({ kind: "linear", column })) },
      regression.longley.data,
    );
    expectCoefficients(model, columns, certified);
    expect(levelAtZero(model) / -3482258.63459582).toBeCloseTo(1, 9);
    expect(Math.sqrt(model.dispersion) / 304.854073561965).toBeCloseTo(1, 9);
    expect(1 - model.deviance / model.nullDeviance).toBeCloseTo(0.995479004577296, 10);
  });

  it("gives lm's log-linear fit, predictions outside the data included", () => {
    const { fit, dispersion, newRows, linearPredictor, standardError } = regression.logGaussian;
    const model = fitModel({
      response: "kilograms", family: "log-gaussian",
      terms: [{ kind: "linear", column: "price", log: true }, { kind: "factor", column: "promotion", reference: "none" }],
    }, regression.simulated);
    expectCoefficients(model, ["price", "promotion[display]", "promotion[feature]"], { estimate: fit.estimate.slice(1), error: fit.error.slice(1) });
    expect(model.dispersion / dispersion).toBeCloseTo(1, 8);
    const prediction = predict(model, newRows);
    expect(largestRelativeDifference(prediction.linearPredictor, linearPredictor)).toBeLessThan(1e-8);
    expect(largestRelativeDifference(prediction.standardError, standardError)).toBeLessThan(1e-8);
    expect(largestRelativeDifference(prediction.mean, linearPredictor.map((value) => Math.exp(value + dispersion / 2)))).toBeLessThan(1e-8);
    expect(Array.from(prediction.outside.price)).toEqual([1, 0, 1]);
  });

  it("gives glm's quasi-Poisson fit with offset, prior weights and a factor", () => {
    const { simulated, quasiPoisson } = regression;
    const model = fitModel({
      response: "units", family: "quasi-poisson", offset: "logExposure", weights: "weight",
      terms: [{ kind: "linear", column: "price", log: true }, { kind: "factor", column: "promotion", reference: "none" }],
    }, { ...simulated, logExposure: simulated.exposure.map(Math.log) });
    const { estimate, error } = quasiPoisson.fit;
    expectCoefficients(model, ["price", "promotion[display]", "promotion[feature]"], { estimate: estimate.slice(1), error: error.slice(1) });
    expect(largestRelativeDifference(model.fitted, quasiPoisson.fitted)).toBeLessThan(1e-8);
    expect(model.dispersion / quasiPoisson.dispersion).toBeCloseTo(1, 8);
    expect(model.deviance / quasiPoisson.deviance).toBeCloseTo(1, 8);
    expect(model.nullDeviance / quasiPoisson.nullDeviance).toBeCloseTo(1, 8);
  });
});

describe("Splines and distributions agree with R's", () => {
  it("has the rows of splines::splineDesign", () => {
    const { lower, upper, size, x, rows } = splines.basis;
    const margin = 0.001 * (upper - lower);
    const own = splineRows(Float64Array.from(x), { lower: lower - margin, upper: upper + margin, intervals: size - 3, wraps: false });
    expect(own.storage).toBe("spline");
    if (own.storage !== "spline") return;
    const dense = x.flatMap((_, row) => {
      const full = new Array<number>(size).fill(0);
      for (let k = 0; k < 4; k++) full[own.first[row] + k] = own.values[4 * row + k];
      return full;
    });
    expect(largestDifference(dense, rows)).toBeLessThan(1e-9);
  });

  it("has the reference's fit at a given penalty with weights and offset, and its straight lines beyond the range", () => {
    const { data, penalty, size, at, linearPredictor, standardError, edf, dispersion } = splines.beyond;
    const model = fitModel({
      response: "y", family: "gaussian", weights: "w", offset: "o", terms: [{ kind: "smooth", column: "x", size, smoothness: { penalty } }],
    }, data);
    expect(model.edf).toBeCloseTo(edf, 7);
    expect(model.dispersion / dispersion).toBeCloseTo(1, 7);
    const prediction = predict(model, at);
    expect(largestDifference(prediction.linearPredictor, linearPredictor)).toBeLessThan(1e-7);
    expect(largestRelativeDifference(prediction.standardError, standardError)).toBeLessThan(1e-7);
    expect(Array.from(prediction.outside.x)).toEqual([1, 1, 0, 0, 0, 1, 1]);
  });

  it("has the quantiles of negative binomial, Poisson and gamma where the coefficients are certain", () => {
    const { mean, dispersion, probability, count, weight } = regression.quantiles;
    mean.forEach((value, row) => {
      const upper = probability[row] > 0.5;
      const level = upper ? 2 * probability[row] - 1 : 1 - 2 * probability[row];
      const certain = { linearPredictor: Math.log(value), standardError: 0, level, quantile: 0 };
      const whole = countInterval({ ...certain, fractional: false }, () => dispersion[row]);
      const continuous = countInterval({ ...certain, fractional: true }, () => dispersion[row]);
      expect(upper ? whole.upper : whole.lower).toBe(Math.abs(count[row]));
      const difference = (upper ? continuous.upper : continuous.lower) - weight[row];
      expect(Math.abs(difference)).toBeLessThan(1e-8 * weight[row] + 1e-12);
    });
  });
});
