import { fitModel, modelReport, predict, termCurve } from "@shared/engine";
import type { ModelData, TermSpec } from "@shared/engine";
import { checkBesideLocal, checkDistinctTotal, hasLocal } from "@shared/engine/fit/local/check-local";
import { weightedVariances } from "@shared/engine/fit/local/weighted-variances";
import { createWorkingRows, writeWorkingRows } from "@shared/engine/fit/local/working-rows";
import { familyRules } from "@shared/engine/family/family";
import { describe, expect, it } from "vitest";
import { everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

const base = everyKindRows(41, 70);
const rows = { ...base, euros: base.depth.map((value) => 7 * value), copy: base.promotion.map((level) => `the ${level}`) };
const local: TermSpec = { kind: "local-regression", column: "temperature", span: 0.6 };
const depth: TermSpec = { kind: "linear", column: "depth" };
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const price: TermSpec = { kind: "smooth", column: "price", size: 6, smoothness: { penalty: 2 } };

describe.each(families)("Beside a local regression columns that others reproduce are as if they had never been named: %s", (family) => {
  it.each<[string, TermSpec[], TermSpec[]]>([
    ["a line in another unit", [local, depth], [local, depth, { kind: "linear", column: "euros" }]],
    ["a factor by other names", [local, promotion], [local, promotion, { kind: "factor", column: "copy" }]],
    ["a line beside a curve's own", [local, { ...price, id: "p" } as TermSpec], [local, { kind: "linear", column: "price" }, { ...price, id: "p" } as TermSpec]],
  ])("%s", (name, bare, more) => {
    const [model, other] = [bare, more].map((terms) => fitModel(modelOf(family, terms), rows));
    expect(largestDifference(other.fitted, model.fitted)).toBeLessThan(1e-5 * Math.max(...model.fitted.map(Math.abs)));
    expect(other.edf).toBeCloseTo(model.edf, 4);
    expect(other.dispersion).toBeCloseTo(model.dispersion, 4);
    const [errors, otherErrors] = [model, other].map((one) => predict(one, rows).standardError);
    expect(largestDifference(otherErrors, errors)).toBeLessThan(1e-4);
    const left = other.terms.find(({ id }) => id === (name.startsWith("a line in") ? "euros" : name.startsWith("a factor") ? "copy" : "p"));
    expect(other.warnings.some(({ code, term }) => code === "columns-indistinguishable" && term === left?.id)).toBe(true);
    if (left?.kind !== "smooth") {
      expect(left?.edf).toBe(0);
      expect([...other.coefficients.slice(left?.first, (left?.first ?? 0) + (left?.count ?? 0))].every((value) => value === 0)).toBe(true);
      expect(termErrors(other, left?.first ?? 0)).toBe(0);
    }
  });
});

/** Variance of one coefficient. */
const termErrors = ({ covariance }: { covariance: Float64Array }, at: number): number => covariance[(at * (at + 1)) / 2 + at];

describe("What cannot stand beside a local regression", () => {
  const grouped: TermSpec = { kind: "random-effect", column: "store" };
  const curves: TermSpec = { kind: "factor-smooth", column: "price", group: "store" };

  it.each<[string, TermSpec[], string]>([
    ["levels per group", [local, grouped], 'Term "store" is on groups, which cannot stand beside the local regression "temperature"; use a smooth in place of "temperature".'],
    ["slopes per group, the other way round", [{ ...grouped, by: "depth" } as TermSpec, local], 'Term "store:depth" is on groups, which cannot stand beside the local regression "temperature"; use a smooth in place of "temperature".'],
    ["curves per group", [price, curves, local], 'Term "price:store" is on groups, which cannot stand beside the local regression "temperature"; use a smooth in place of "temperature".'],
    ["a falling curve", [{ ...price, shape: "decreasing", id: "p" } as TermSpec, local], 'Term "p" has a shape, which cannot stand beside the local regression "temperature"; use a smooth in place of "temperature".'],
  ])("is refused by both names: %s", (_name, terms, message) => {
    expect(() => checkBesideLocal(terms)).toThrow(expect.objectContaining({ name: "EngineError", code: "spec-invalid", message }) as Error);
    expect(() => fitModel(modelOf("gaussian", terms), rows)).toThrow(message);
  });

  it("is nothing where there is none, nor for other terms", () => {
    expect(() => checkBesideLocal([grouped, price, curves])).not.toThrow();
    expect(() => checkBesideLocal([local, price, promotion, depth])).not.toThrow();
    expect([hasLocal([price, local]), hasLocal([]), hasLocal([price])]).toEqual([true, false, false]);
  });

  it("are more than 2,000 distinct values together", () => {
    expect(() => checkDistinctTotal([{ id: "a", count: 1200 }, { id: "b", count: 800 }])).not.toThrow();
    expect(() => checkDistinctTotal([{ id: "a", count: 1201 }, { id: "b", count: 800 }])).toThrow(
      'Local regressions "a", "b" have 2001 distinct values together; a model takes up to 2000. Round their columns, or use a smooth for one.',
    );
  });
});

describe("A line of a local regression's own", () => {
  const far = (away: number) => ({ ...rows, temperature: rows.temperature.map((value) => value + away), again: rows.temperature.map((value) => 3 - 2 * (value + away)) });

  it.each([0, 1e4, -1e6])("is refused in any unit, however far from zero the column lies: %d", (away) => {
    expect(() => fitModel(modelOf("gaussian", [{ kind: "linear", column: "again" }, local]), far(away))).toThrow(
      'Terms "again" and "temperature" cannot be told apart: a local regression of degree 1 draws straight lines itself. Leave one of them out, or give the local regression degree 0.',
    );
  });

  it.each([0, 1e4])("and its parabola, of one of degree 2: %d", (away) => {
    const data = { ...far(away), bent: rows.temperature.map((value) => (value - 12) ** 2) };
    const two: TermSpec = { ...local, degree: 2 } as TermSpec;
    expect(() => fitModel(modelOf("gaussian", [two, promotion, { kind: "linear", column: "again" }, { kind: "linear", column: "bent" }]), data)).toThrow(
      'Terms "again" and "temperature" cannot be told apart: a local regression of degree 2 draws straight lines and parabolas itself. Leave one of them out, or give the local regression degree 0.',
    );
    expect(() => fitModel(modelOf("gaussian", [two, promotion, { kind: "linear", column: "bent" }]), data)).toThrow('Terms "bent" and "temperature" cannot be told apart');
    expect(fitModel(modelOf("gaussian", [local, promotion, { kind: "linear", column: "bent" }]), data).converged).toBe(true);
  });
});

describe("The sum of weighted variances", () => {
  it("is the sum over rows of weight times variance, each by prediction", () => {
    const model = fitModel(modelOf("gaussian", [local, price, promotion]), rows);
    const weights = Float64Array.from(rows.price, (value, row) => value + (row % 3));
    const { standardError } = predict(model, rows);
    const plain = standardError.reduce((sum, error, row) => sum + weights[row] * error ** 2, 0);
    expect(weightedVariances(model.terms, model.covariance, { data: rows, weights })).toBeCloseTo(plain, 9);
    expect(weightedVariances(model.terms, model.covariance, { data: rows, weights: weights.map(() => 0) })).toBe(0);
  });

  it("of plain least squares over the dispersion is the degrees of freedom", () => {
    const model = fitModel(modelOf("gaussian", [depth, promotion]), rows);
    const perDispersion = model.covariance.map((value) => value / model.dispersion);
    expect(weightedVariances(model.terms, perDispersion, { data: rows, weights: new Float64Array(70).fill(1) })).toBeCloseTo(4, 10);
  });
});

describe("Working rows", () => {
  const data = { data: rows as ModelData, count: 3, response: Float64Array.of(2, 0, 5), offset: Float64Array.of(0.5, 0, -1), weights: Float64Array.of(1, 2, 1) };

  it("of a normal family are the response less the offset, and stay so", () => {
    const working = createWorkingRows(familyRules("gaussian"), data);
    writeWorkingRows(working, Float64Array.of(9, 9, 9), 1);
    expect([...working.response]).toEqual([1.5, 0, 6]);
    expect([...working.weights]).toEqual([1, 2, 1]);
    expect([...createWorkingRows(familyRules("log-gaussian"), { ...data, response: Float64Array.of(1, Math.E, 1) }).response]).toEqual([-0.5, 1, 1]);
  });

  it("of counts are eta - offset + (y - mu) / mu under weights of mu, none below 1e-12 of the largest", () => {
    const working = createWorkingRows(familyRules("quasi-poisson"), data);
    writeWorkingRows(working, Float64Array.of(Math.log(2), Math.log(3), -200), 1);
    expect(working.response[0]).toBeCloseTo(Math.log(2) - 0.5, 12);
    expect(working.response[1]).toBeCloseTo(Math.log(3) - 1, 12);
    expect([working.weights[0], working.weights[1]].map((value) => Math.round(1e9 * value) / 1e9)).toEqual([2, 6]);
    expect(working.weights[2]).toBeCloseTo(6e-12, 20);
    expect(working.plain[2]).toBeLessThan(1e-80);
    expect([...data.weights]).toEqual([1, 2, 1]);
  });
});

describe("A model with a local regression that fits perfectly", () => {
  it("is said to, has no tests, and finite numbers all through", () => {
    const line = { ...rows, y: rows.temperature.map((value) => 3 - 0.2 * value) };
    const model = fitModel(modelOf("gaussian", [local, promotion]), line);
    expect(model.warnings.map(({ code }) => code)).toContain("perfect-fit");
    const report = modelReport(model);
    expect(report.terms.map(({ test }) => test)).toEqual([null, null]);
    expect([...model.fitted, ...model.covariance, ...termCurve(model, "temperature").upper].every(Number.isFinite)).toBe(true);
    expect(largestDifference(model.fitted, line.y)).toBeLessThan(1e-9);
  });
});
