import { binomial } from "@shared/engine/family/binomial";
import { familyRules } from "@shared/engine/family/family";
import type { FamilyRules, IterativeRules } from "@shared/engine/family/family-rules";
import { gaussian } from "@shared/engine/family/gaussian";
import { logGaussian } from "@shared/engine/family/log-gaussian";
import { negativeBinomial } from "@shared/engine/family/negative-binomial";
import { quasiPoisson } from "@shared/engine/family/quasi-poisson";
import { describe, expect, it } from "vitest";

/** All reference values: R 4.2.2, the call beside each. */
const weights = Float64Array.of(1, 2, 1, 0.5, 1, 3);
const positive = Float64Array.of(1.2, 3.4, 0.7, 2.2, 5.1, 1.9);
const likelihood = (rules: FamilyRules, rows: { response: Float64Array; linearPredictor: Float64Array; weights: Float64Array; theta?: number }) => {
  if (rules.logLikelihood === null) throw new Error("This family has no likelihood.");
  return rules.logLikelihood({ theta: 1, ...rows });
};

describe("The log-likelihood", () => {
  it("of the negative binomial is sum(w * dnbinom(y, size = 2.2, mu, log = TRUE))", () => {
    const mean = Float64Array.of(2.5, 0.8, 6, 9, 3.1, 5.5);
    const response = Float64Array.of(3, 0, 7, 12, 2, 5);
    const value = likelihood(negativeBinomial, { response, linearPredictor: mean.map(Math.log), weights, theta: 2.2 });
    expect(value).toBeCloseTo(-16.4556499308262, 11);
  });

  it("of the binomial is sum(dbinom(successes, trials, p, log = TRUE))", () => {
    const trials = Float64Array.of(10, 4, 1, 25, 8, 3);
    const response = Float64Array.of(3, 0, 1, 12, 8, 1).map((successes, row) => successes / trials[row]);
    const linearPredictor = Float64Array.of(0.2, 0.15, 0.7, 0.5, 0.9, 0.4).map((p) => Math.log(p / (1 - p)));
    expect(likelihood(binomial, { response, linearPredictor, weights: trials })).toBeCloseTo(-6.15624397145361, 11);
  });

  it("of the gaussian is sum(dnorm(y, m, sqrt(s2 / w), log = TRUE)) at s2 = sum(w (y - m)^2) / 6", () => {
    const linearPredictor = Float64Array.of(1, 3, 1, 2, 5.5, 2.2);
    expect(likelihood(gaussian, { response: positive, linearPredictor, weights })).toBeCloseTo(-2.27296510023634, 11);
  });

  it("of the gaussian is logLik(lm(y ~ x)) for a straight line", () => {
    const linearPredictor = Float64Array.from([1, 2, 3, 4, 5, 6], (x) => 1.40666666666667 + 0.288571428571428 * x);
    const value = likelihood(gaussian, { response: positive, linearPredictor, weights: new Float64Array(6).fill(1) });
    expect(value).toBeCloseTo(-10.4525964543283, 10);
  });

  it("of the log-gaussian is that of the units, not of their logarithms: sum(dlnorm(y, e, sqrt(s2 / w), log = TRUE))", () => {
    const linearPredictor = Float64Array.of(0.1, 1.1, -0.2, 0.9, 1.5, 0.5);
    expect(likelihood(logGaussian, { response: positive, linearPredictor, weights })).toBeCloseTo(-0.91025113956486, 11);
  });

  it("does not exist for quasi-Poisson", () => {
    expect(quasiPoisson.logLikelihood).toBe(null);
  });

  it("stays finite for perfect fits and for predictors beyond reason", () => {
    expect(Number.isFinite(likelihood(gaussian, { response: positive, linearPredictor: positive, weights }))).toBe(true);
    const extreme = Float64Array.of(-800, 800, 0, -50, 50, 400);
    const counts = Float64Array.of(3, 0, 7, 1e6, 0, 5);
    expect(Number.isFinite(likelihood(negativeBinomial, { response: counts, linearPredictor: extreme, weights, theta: 1e-3 }))).toBe(true);
    expect(Number.isFinite(likelihood(binomial, { response: Float64Array.of(1, 0, 0.5, 1, 0, 1), linearPredictor: extreme, weights }))).toBe(true);
  });
});

const iterative: [string, IterativeRules, number, number[], number[]][] = [
  ["quasi-poisson", quasiPoisson, 1, [0, 2, 13.5], [0.4, 3, 12]],
  ["negative-binomial", negativeBinomial, 2.5, [0, 2, 13.5], [0.4, 3, 12]],
  ["negative-binomial of large theta", negativeBinomial, 1e7, [0, 2, 13.5], [0.4, 3, 12]],
  ["binomial", binomial, 1, [0, 0.3, 1], [0.2, 0.4, 0.9]],
];

describe.each(iterative)("The %s family", (_name, rules, theta, responses, means) => {
  const linkOf = (mean: number) => (rules === binomial ? Math.log(mean / (1 - mean)) : Math.log(mean));

  it("has a unit deviance of zero at the response, and above zero elsewhere", () => {
    for (const response of responses) {
      for (const mean of means) expect(rules.unitDeviance(response, mean, theta)).toBeGreaterThan(0);
      if (response > 0 && response < 1) expect(rules.unitDeviance(response, response, theta)).toBeCloseTo(0, 14);
    }
  });

  it("has a deviance whose slope by the mean is -2 (y - mu) / variance (McCullagh & Nelder 1989, section 9.2.2)", () => {
    for (const response of responses) {
      for (const mean of means) {
        const step = 1e-5 * mean;
        const slope = (rules.unitDeviance(response, mean + step, theta) - rules.unitDeviance(response, mean - step, theta)) / (2 * step);
        const expected = (-2 * (response - mean)) / rules.variance(mean, theta);
        expect(Math.abs(slope - expected)).toBeLessThan(1e-6 * Math.max(1, Math.abs(expected)));
      }
    }
  });

  it("has working weights of (d mean / d eta)^2 / variance, and a working response that leads to the response's mean", () => {
    const rows = { response: Float64Array.from(responses), weights: Float64Array.of(1, 2, 0.5), offset: Float64Array.of(0.1, 0, -0.3), theta };
    const mean = Float64Array.from(means);
    const linearPredictor = mean.map(linkOf);
    const [workingResponse, workingWeights] = [new Float64Array(3), new Float64Array(3)];
    rules.working({ ...rows, mean, linearPredictor, workingResponse, workingWeights });
    for (let row = 0; row < 3; row++) {
      const slope = (rules.mean(linearPredictor[row] + 1e-6, 1) - rules.mean(linearPredictor[row] - 1e-6, 1)) / 2e-6;
      expect(workingWeights[row]).toBeCloseTo((rows.weights[row] * slope ** 2) / rules.variance(mean[row], theta), 7);
      const wanted = linearPredictor[row] - rows.offset[row] + (responses[row] - mean[row]) / slope;
      expect(workingResponse[row]).toBeCloseTo(wanted, 6);
    }
  });

  it("has Pearson's statistic as the weighted squares over the variance", () => {
    const rows = { response: Float64Array.from(responses), mean: Float64Array.from(means), weights: Float64Array.of(1, 2, 0.5), theta };
    const expected = responses.reduce((sum, response, row) => sum + (rows.weights[row] * (response - means[row]) ** 2) / rules.variance(means[row], theta), 0);
    expect(rules.pearson(rows)).toBeCloseTo(expected, 12);
  });

  it("starts at finite predictors that put the means near the responses", () => {
    const start = rules.start({ response: Float64Array.from(responses), weights: Float64Array.of(1, 20, 3) });
    start.forEach((predictor, row) => {
      expect(Number.isFinite(predictor)).toBe(true);
      expect(Math.abs(rules.mean(predictor, 1) - responses[row])).toBeLessThan(0.26);
    });
  });

  it("has finite means, above zero, at any predictor", () => {
    for (const predictor of [-1e9, -700, 0, 700, 1e9]) {
      const mean = rules.mean(predictor, 1);
      expect(mean > 0 && Number.isFinite(mean) && rules.variance(mean, theta) > 0).toBe(true);
    }
  });
});

describe("The family's deviance", () => {
  it.each([[0, 2, 3, 3.06495374259594], [7, 4, 0.5, 0.172236674606058], [120, 100, 9, 0.29332692035678]])(
    "of the negative binomial at %d, mean %d and theta %d is 2 (dnbinom(y, mu = y) - dnbinom(y, mu))", (response, mean, theta, expected) => {
      expect(negativeBinomial.unitDeviance(response, mean, theta)).toBeCloseTo(expected, 10);
    });

  it("of the negative binomial is quasi-Poisson's where theta is large", () => {
    expect(negativeBinomial.unitDeviance(5, 7, 1e12)).toBeCloseTo(quasiPoisson.unitDeviance(5, 7, 1), 9);
  });

  it("is found by the family's name, known or unknown in scale", () => {
    const scales = (["gaussian", "log-gaussian", "quasi-poisson", "negative-binomial", "binomial"] as const).map((name) => familyRules(name).scale);
    expect(scales).toEqual(["unknown", "unknown", "unknown", "known", "known"]);
  });
});
