import { fitModel, residuals } from "@shared/engine";
import type { Family, FittedModel, ResidualKind } from "@shared/engine";
import { betweenQuantile } from "@shared/engine/family/between-quantile";
import { amountAtMost, countAtMost, countLogDensity, countSize, logTailBound } from "@shared/engine/family/count-distribution";
import { countPlace } from "@shared/engine/family/count-place";
import { exponential } from "@shared/engine/family/exponential";
import { gammaBelow } from "@shared/engine/family/gamma-below";
import { logExcess, logRatioExcess } from "@shared/engine/family/log-excess";
import { logLinkInterval } from "@shared/engine/family/log-link";
import { pearsonStatistic } from "@shared/engine/family/pearson-statistic";
import { standardised } from "@shared/engine/family/standardised";
import { describe, expect, it } from "vitest";
import { everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** ln n! by a plain sum. */
const logFactorial = (n: number): number => Array.from({ length: n }, (_, k) => Math.log(k + 1)).reduce((sum, value) => sum + value, 0);
const poisson = (k: number, mean: number) => Math.exp(k * Math.log(mean) - mean - logFactorial(k));
/** Failures and successes: mean m and size s, by the product of (s + j) / (j + 1). */
const negativeBinomial = (k: number, mean: number, size: number): number =>
  Array.from({ length: k }, (_, j) => ((size + j) / (j + 1)) * (mean / (mean + size))).reduce((product, value) => product * value, (size / (mean + size)) ** size);

describe("Probabilities of counts are those of plain sums", () => {
  it.each([[0.3, 1], [4, 1], [4, 0.2], [2.5, 3], [11, 1.4], [0.05, 6]])("of mean %d and variance over mean %d", (mean, ratio) => {
    const size = countSize(mean, ratio);
    let below = 0;
    for (let k = 0; k < 40; k++) {
      const density = ratio <= 1 ? poisson(k, mean) : negativeBinomial(k, mean, size);
      below += density;
      expect(countAtMost(k, mean, ratio)).toBeCloseTo(below, 11);
      expect(countLogDensity(k, mean, size)).toBeCloseTo(Math.log(density), 9);
      // The bound holds the tail on the count's own side.
      const tail = k < mean ? below : 1 - below + density;
      expect(Math.exp(logTailBound(k, mean, size))).toBeGreaterThanOrEqual(tail - 1e-12);
    }
    expect(countAtMost(-1, mean, ratio)).toBe(0);
  });

  it("of a response between two whole numbers have no width, of one of them its own", () => {
    const place = (response: number) => countPlace({ response, mean: 3, ratio: 2, fractional: false });
    expect(place(2.5)).toEqual({ below: countAtMost(2, 3, 2), atMost: countAtMost(2, 3, 2) });
    expect(place(2)).toEqual({ below: countAtMost(1, 3, 2), atMost: countAtMost(2, 3, 2) });
    expect(place(0).below).toBe(0);
  });
});

describe("Probabilities of amounts are integrals of the gamma density", () => {
  /** Simpson's rule in the root of x, which smooths the start of small shapes. */
  const integral = (x: number, shape: number) => {
    const steps = 4000;
    const end = Math.sqrt(x);
    const density = (root: number) => (root === 0 ? 0 : 2 * Math.exp((2 * shape - 1) * Math.log(root) - root * root));
    let sum = density(0) + density(end);
    for (let k = 1; k < steps; k++) sum += (k % 2 === 1 ? 4 : 2) * density((end * k) / steps);
    return (sum * end) / (3 * steps);
  };
  /** Gamma(n + 1/2) and Gamma(n) by their recursions. */
  const gamma = (shape: number): number => (shape === 0.5 ? Math.sqrt(Math.PI) : shape === 1 ? 1 : (shape - 1) * gamma(shape - 1));

  it.each([1, 1.5, 2, 4.5, 9, 16.5, 24, 26.5, 60])("of shape %d", (shape) => {
    for (const share of [0.2, 0.7, 1, 1.4, 2.5]) expect(gammaBelow(share * shape, shape)).toBeCloseTo(integral(share * shape, shape) / gamma(shape), 9);
  });

  it("in the mean's unit: variance over mean is the scale", () => {
    expect(amountAtMost(3, 4, 2)).toBe(gammaBelow(1.5, 2));
    expect([amountAtMost(0, 4, 2), amountAtMost(-1, 4, 2), amountAtMost(3.99, 4, 1e-20), amountAtMost(4, 4, 1e-20)]).toEqual([0, 0, 0, 1]);
  });
});

describe("Small helpers keep to what they say", () => {
  it("exponentials are finite and above zero", () => {
    expect([exponential(0), exponential(300), exponential(301), exponential(1e9)]).toEqual([1, Math.exp(300), Math.exp(300), Math.exp(300)]);
    expect([exponential(-301), exponential(-Infinity)]).toEqual([Math.exp(-300), Math.exp(-300)]);
  });

  it("logarithms' excess has its digits near zero, by the series -x^2/2 + x^3/3 - ...", () => {
    for (const x of [1e-12, -1e-6, 1e-3, -0.019]) expect(logExcess(x) / (-x * x / 2 + x ** 3 / 3 - x ** 4 / 4 + x ** 5 / 5 - x ** 6 / 6 + x ** 7 / 7)).toBeCloseTo(1, 10);
    expect([logExcess(0), logExcess(-1), logExcess(-2)]).toEqual([-0, -Infinity, -Infinity]);
    expect(logRatioExcess(3, 2)).toBeCloseTo(Math.log(1.5) - 0.5, 14);
    expect(logRatioExcess(2e-9 + 2, 2)).toBeCloseTo(-5e-19, 24);
  });

  it("deviations are in standard deviations, none of nothing, and finite where there is no variance", () => {
    expect([standardised(3, 9), standardised(-3, 9), standardised(0, 0)]).toEqual([1, -1, 0]);
    expect(Number.isFinite(standardised(1, 0))).toBe(true);
  });

  it("quantiles between two probabilities go from end to end, within 8.3", () => {
    expect(betweenQuantile({ below: 0.5, atMost: 0.5 }, 0.7)).toBeCloseTo(0, 14);
    expect(betweenQuantile({ below: 0.0227501319481792, atMost: 1 }, 0)).toBeCloseTo(-2, 12);
    expect(betweenQuantile({ below: 0, atMost: 0.977249868051821 }, 1)).toBeCloseTo(2, 12);
    for (const place of [{ below: 0, atMost: 0 }, { below: 1, atMost: 1 }]) expect(Math.abs(betweenQuantile(place, 0.5))).toBeLessThan(8.3);
  });

  it("Pearson's statistic and a mean's interval are written out", () => {
    const rows = { response: Float64Array.of(3, 0), mean: Float64Array.of(2, 4), weights: Float64Array.of(1, 0.5), theta: 2 };
    expect(pearsonStatistic((mean, theta) => mean + mean ** 2 / theta)(rows)).toBeCloseTo(1 / 4 + (0.5 * 16) / 12, 14);
    expect(logLinkInterval({ linearPredictor: 1, standardError: 0.5, quantile: 2 })).toEqual({ lower: 1, upper: Math.exp(2) });
  });
});

describe("Residuals are what their definitions give, with weights and offset", () => {
  const base = everyKindRows(29, 60);
  const rows = { ...base, exposure: base.depth, weight: base.price.map((_, row) => 1 + (row % 3)) };
  const column = (family: Family) => rows[modelOf(family, []).response as "y"];
  const fit = (family: Family) => fitModel(modelOf(family, [{ kind: "smooth", column: "price", size: 6 }, { kind: "factor", column: "promotion" }], { offset: "exposure", weights: "weight" }), rows);
  const variance: Record<Family, (mean: number, model: FittedModel) => number> = {
    gaussian: () => 1, "log-gaussian": () => 1, "quasi-poisson": (mean) => mean, binomial: (mean) => mean * (1 - mean),
    "negative-binomial": (mean, { theta }) => mean * (1 + mean / (theta ?? 1)),
  };
  const part: Record<Family, (y: number, mean: number, model: FittedModel) => number> = {
    gaussian: (y, mean) => (y - mean) ** 2, "log-gaussian": (y, mean) => (y - mean) ** 2,
    "quasi-poisson": (y, mean) => 2 * ((y > 0 ? y * Math.log(y / mean) : 0) - y + mean),
    binomial: (y, mean) => 2 * ((y > 0 ? y * Math.log(y / mean) : 0) + (y < 1 ? (1 - y) * Math.log((1 - y) / (1 - mean)) : 0)),
    "negative-binomial": (y, mean, { theta }) => 2 * ((y > 0 ? y * Math.log(y / mean) : 0) - (y + (theta ?? 1)) * Math.log((y + (theta ?? 1)) / (mean + (theta ?? 1)))),
  };

  it.each(families.flatMap((family) => (["response", "pearson", "deviance"] as const).map((kind) => ({ family, kind }))))("$family: $kind", ({ family, kind }) => {
    const model = fit(family);
    const isLog = family === "log-gaussian";
    const own = column(family).map((value) => (isLog && kind !== "response" ? Math.log(value) : value));
    const mean = model.fitted.map((value) => (isLog && kind !== "response" ? Math.log(value) - model.dispersion / 2 : value));
    const expected: Record<Exclude<ResidualKind, "quantile">, (row: number) => number> = {
      response: (row) => own[row] - mean[row],
      pearson: (row) => (Math.sqrt(rows.weight[row]) * (own[row] - mean[row])) / Math.sqrt(variance[family](mean[row], model)),
      deviance: (row) => Math.sign(own[row] - mean[row]) * Math.sqrt(rows.weight[row] * Math.max(0, part[family](own[row], mean[row], model))),
    };
    expect(largestDifference(residuals(model, rows, { kind }), own.map((_value, row) => expected[kind](row)))).toBeLessThan(1e-7);
  });

  it.each(["gaussian", "log-gaussian"] as const)("%s: quantile residuals are Pearson's over the root of the dispersion", (family) => {
    const model = fit(family);
    const pearson = residuals(model, rows, { kind: "pearson" });
    expect(largestDifference(residuals(model, rows, { kind: "quantile" }), pearson.map((value) => value / Math.sqrt(model.dispersion)))).toBeLessThan(1e-10);
  });
});
