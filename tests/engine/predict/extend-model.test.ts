import { covarianceQuadratic, designRows, extendModel, fitModel, parseModel, predict, serialiseModel } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";
import { denseCovariance, denseRows, smallestEigenvalue } from "./dense-covariance";

const rows = everyKindRows(33, 80);
const lastWeek = Math.max(...rows.week);
const firstWeek = Math.min(...rows.week);
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 6, smoothness: { penalty: 2 } };
const walk: TermSpec = { kind: "random-walk", column: "week", smoothness: { penalty: 4 } };
const level: TermSpec = { kind: "random-effect", column: "store", smoothness: { penalty: 1.5 } };
const slope: TermSpec = { kind: "random-effect", column: "store", by: "depth", smoothness: { penalty: 0.7 } };
const curves: TermSpec = { kind: "factor-smooth", column: "price", log: true, group: "store", size: 4, smoothness: { penalty: 1.2 } };
const fit = (...terms: TermSpec[]): FittedModel => fitModel(modelOf("gaussian", terms), rows);
/** One row per week, everything else the same. */
const inWeeks = (weeks: number[]): ModelData => ({ price: weeks.map(() => 1.4), depth: weeks.map(() => 0.2), store: weeks.map(() => "north"), week: weeks });

describe("A slowly moving level beyond its weeks", () => {
  const model = fit(price, walk);
  const step = model.dispersion / 4;
  const variances = (weeks: number[]) => predict(model, inWeeks(weeks)).standardError.map((error) => error ** 2);

  it.each([["after", lastWeek, 1], ["before", firstWeek, -1]])("stays where it is and grows by dispersion / penalty each week: %s", (_name, from, direction) => {
    const weeks = [0, 1, 2, 10, 52].map((ahead) => from + direction * ahead);
    const [edge, ...beyond] = variances(weeks);
    [1, 2, 10, 52].forEach((ahead, k) => expect(beyond[k] - edge).toBeCloseTo(ahead * step, 12));
    const { contributions, outside } = predict(model, inWeeks(weeks));
    expect(new Set(contributions.week).size).toBe(1);
    expect([...outside.week]).toEqual([0, 1, 1, 1, 1]);
  });

  it("has a covariance between two later weeks of the earlier one's variance beyond the last", () => {
    const weeks = [lastWeek, lastWeek + 3, lastWeek + 8, firstWeek - 5];
    const extended = extendModel(model, inWeeks(weeks));
    const whole = denseRows(designRows(extended, inWeeks(weeks)), extended.coefficients.length);
    const between = (left: number, right: number) => covarianceQuadratic(extended, whole[left], whole[right]);
    expect(between(1, 2) - between(0, 0)).toBeCloseTo(3 * step, 12);
    expect(between(0, 2) - between(0, 0)).toBeCloseTo(0, 12);
    // What came before the first week and what comes after the last have only the known weeks in common.
    expect(between(3, 1)).toBeCloseTo(between(3, 0), 12);
  });
});

describe.each<[string, TermSpec[]]>([
  ["a level per group", [price, level]],
  ["a level and a slope per group", [price, level, slope]],
  ["curves per group", [price, curves]],
  ["curves and slopes per group, and a slowly moving level", [walk, price, curves, slope]],
])("A model with %s, for groups and weeks never seen,", (_name, terms) => {
  const model = fit(...terms);
  const known = { ...rows };
  const strange: ModelData = { price: [1.2, 1.7, 1.2, 1.5], depth: [0.1, 0.2, 0.1, 0.3], store: ["new", "new", "newer", "north"], week: [lastWeek + 2, lastWeek + 2, lastWeek + 4, lastWeek] };
  const extended = extendModel(model, strange);
  const whole = denseRows(designRows(extended, strange), extended.coefficients.length);
  const between = (left: number, right: number) => covarianceQuadratic(extended, whole[left], whole[right]);

  it("predicts known rows as before, to the last digits", () => {
    const [before, after] = [model, extended].map((one) => predict(one, known));
    expect(largestDifference(before.linearPredictor, after.linearPredictor)).toBeLessThan(1e-13);
    expect(largestDifference(before.standardError, after.standardError)).toBeLessThan(1e-12);
    expect(extendModel(model, known)).toBe(model);
    expect(extendModel(extended, strange)).toBe(extended);
  });

  it("has a covariance that is symmetric, positive semidefinite and agrees with its rows' standard errors", () => {
    const size = extended.coefficients.length;
    const dense = denseCovariance(extended);
    expect(largestDifference(dense, Array.from(dense, (_, at) => dense[(at % size) * size + Math.floor(at / size)]))).toBeLessThan(1e-13);
    expect(smallestEigenvalue(dense, size)).toBeGreaterThan(-1e-12);
    expect(extended.coefficientNames).toHaveLength(size);
    expect(new Set(extended.coefficientNames).size).toBe(size);
    const { standardError } = predict(model, strange);
    expect(largestDifference(standardError, whole.map((_, row) => Math.sqrt(between(row, row))))).toBeLessThan(1e-12);
  });

  it("gives two rows of one new group the group's own scatter in common, and rows of two groups none of it", () => {
    // Rows 0 and 2 are the same but for the group: what rows 0 and 1 share beyond rows 2 and 1 is the scatter of one group.
    const shared = between(0, 1) - between(2, 1);
    expect(shared).toBeGreaterThan(0.1 * model.dispersion);
    expect(between(0, 0) * between(1, 1)).toBeGreaterThan(between(0, 1) ** 2);
  });

  it("survives its text", () => {
    expect(parseModel(serialiseModel(extended))).toEqual(extended);
  });
});

describe("A new group's scatter", () => {
  it("is dispersion / penalty of the level, and of the slope times its number squared", () => {
    const model = fit(price, level, slope);
    const at = (store: string, depth: number): ModelData => ({ price: [1.4], depth: [depth], store: [store] });
    const variance = (data: ModelData) => predict(model, data).standardError[0] ** 2;
    const [none, some] = [0, 0.3].map((depth) => variance(at("new", depth)));
    expect(some - none).toBeCloseTo((model.dispersion / 0.7) * 0.09, 12);
    const extended = extendModel(model, at("new", 0));
    const size = extended.coefficients.length;
    const unit = (k: number) => Float64Array.from({ length: size }, (_, i) => Number(i === k));
    const own = extended.coefficientNames.flatMap((name, k) => (name.endsWith("[new]") ? [covarianceQuadratic(extended, unit(k), unit(k))] : []));
    expect(own).toHaveLength(2);
    expect(own[0]).toBeCloseTo(model.dispersion / 1.5, 12);
    expect(own[1]).toBeCloseTo(model.dispersion / 0.7, 12);
  });
});
