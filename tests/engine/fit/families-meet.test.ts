import { fitModel, predict } from "@shared/engine";
import type { FittedModel, ModelData } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, inOrder, modelOf, withPenalty } from "../support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "../support/measures";

/** Families where one is another's special case or limit, for every kind of term, penalties given. */
const rows = everyKindRows(97, 90);
const numbers = rows.y.map((_, row) => row);
const kinds = Object.entries(everyKind);
const predictorOf = (model: FittedModel, data: ModelData = rows) => predict(model, data).linearPredictor;

describe("A lognormal model", () => {
  it.each(kinds)("is the normal model of the logarithm, its mean half a dispersion above: %s", (_name, terms) => {
    const logs = { ...rows, y: rows.sales.map(Math.log) };
    const [lognormal, normal] = [fitModel(modelOf("log-gaussian", terms), rows), fitModel(modelOf("gaussian", terms), logs)];
    expect(largestDifference(lognormal.coefficients, normal.coefficients)).toBeLessThan(1e-12);
    expect(largestDifference(lognormal.covariance, normal.covariance)).toBeLessThan(1e-12);
    expect([lognormal.edf, lognormal.dispersion, lognormal.deviance, lognormal.criterion]).toEqual([normal.edf, normal.dispersion, normal.deviance, normal.criterion]);
    expect(largestRelativeDifference(lognormal.fitted, normal.fitted.map((value) => Math.exp(value + normal.dispersion / 2)))).toBeLessThan(1e-12);
    const [interval, plain] = [lognormal, normal].map((model) => predict(model, rows, { level: 0.8, interval: "observation" }));
    expect(largestRelativeDifference(interval.upper, plain.upper.map(Math.exp))).toBeLessThan(1e-12);
    expect(largestRelativeDifference(interval.lower, plain.lower.map(Math.exp))).toBeLessThan(1e-12);
  });
});

describe("A negative binomial model of counts that scatter less than Poisson's", () => {
  const even = { ...rows, counts: rows.counts.map((_value, row) => Math.round(22 - 3 * rows.price[row]) + (row % 5)) };

  it.each(kinds)("is quasi-Poisson's fit: theta at its end, dispersion 1: %s", (_name, terms) => {
    const [counted, quasi] = [fitModel(modelOf("negative-binomial", terms), even), fitModel(modelOf("quasi-poisson", terms), even)];
    expect(counted.theta).toBeGreaterThan(1e6);
    expect(counted.dispersion).toBe(1);
    expect(largestDifference(predictorOf(counted, even), predictorOf(quasi, even))).toBeLessThan(1e-4);
    const [one, other] = [counted, quasi].map((model) => predict(model, even).standardError);
    expect(largestRelativeDifference(one, other.map((error) => error / Math.sqrt(quasi.dispersion)))).toBeLessThan(1e-3);
  });
});

describe("A binomial model", () => {
  const trials = numbers.map((row) => 2 + (row % 3));
  const wins = trials.map((count, row) => Math.min(count, Math.round(rows.share[row] * count)));
  const grouped = { ...rows, trials, share: wins.map((won, row) => won / trials[row]) };
  const order = numbers.flatMap((row) => Array.from({ length: trials[row] }, () => row));
  const single = { ...inOrder(rows, order), share: numbers.flatMap((row) => Array.from({ length: trials[row] }, (_, k) => Number(k < wins[row]))) };
  /** Means over rows and nearest rows are others where a row is there once for each trial. */
  const ofRange = kinds.filter(([name]) => !["natural spline", "local regression", "tensor product", "factor-smooth"].includes(name));

  it.each(ofRange)("of shares of trials is that of a row for each: %s", (_name, terms) => {
    const [many, one] = [fitModel(modelOf("binomial", terms), single), fitModel(modelOf("binomial", terms, { weights: "trials" }), grouped)];
    expect(largestDifference(predictorOf(many), predictorOf(one))).toBeLessThan(1e-5);
    expect(many.edf).toBeCloseTo(one.edf, 5);
    expect(largestRelativeDifference(predict(many, rows).standardError, predict(one, rows).standardError)).toBeLessThan(1e-4);
  });

  it.each(kinds)("of next to nothing is quasi-Poisson's, on the log scale: %s", (_name, terms) => {
    const rare = { ...rows, share: rows.counts.map((count) => count * 1e-7), counts: rows.counts };
    const heavy = { ...rare, weight: numbers.map(() => 1e7) };
    const [share, counts] = [fitModel(modelOf("binomial", terms, { weights: "weight" }), heavy), fitModel(modelOf("quasi-poisson", terms), rows)];
    expect(largestDifference(predictorOf(share).map((value) => value + 7 * Math.log(10)), predictorOf(counts))).toBeLessThan(1e-4);
    expect(share.deviance / counts.deviance).toBeCloseTo(1, 4);
  });
});

describe("A quasi-Poisson model", () => {
  it.each(kinds)("of counts by the dozen is that of counts under a penalty a dozenth: %s", (_name, terms) => {
    const dozens = { ...rows, counts: rows.counts.map((count) => 12 * count) };
    const [one, other] = [fitModel(modelOf("quasi-poisson", withPenalty(terms, 3)), rows), fitModel(modelOf("quasi-poisson", withPenalty(terms, 36)), dozens)];
    expect(largestDifference(predictorOf(other, dozens).map((value) => value - Math.log(12)), predictorOf(one))).toBeLessThan(1e-6);
    expect(other.dispersion / one.dispersion).toBeCloseTo(12, 4);
    expect(largestRelativeDifference(predict(other, rows).standardError, predict(one, rows).standardError)).toBeLessThan(1e-5);
  });

  it.each(kinds)("of sums of weeks alike is that of the weeks: an offset for how many they are: %s", (_name, terms) => {
    const weeks = numbers.map((row) => 1 + (row % 4));
    const summed = { ...rows, counts: rows.counts.map((count, row) => count * weeks[row]), exposure: weeks.map(Math.log) };
    const averaged = { ...rows, weeks };
    const [sums, means] = [fitModel(modelOf("quasi-poisson", terms, { offset: "exposure" }), summed), fitModel(modelOf("quasi-poisson", terms, { weights: "weeks" }), averaged)];
    const level = { ...rows, exposure: numbers.map(() => 0), weeks: numbers.map(() => 1) };
    expect(largestDifference(predictorOf(sums, level), predictorOf(means, level))).toBeLessThan(1e-5);
    expect(sums.deviance / means.deviance).toBeCloseTo(1, 6);
    expect(sums.dispersion / means.dispersion).toBeCloseTo(1, 5);
  });
});
