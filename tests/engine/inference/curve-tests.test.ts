import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { exampleModel, exampleNames, storeRows } from "./support/example-models";

const x = Array.from({ length: 120 }, (_, row) => ((row * 37) % 120) / 40);
const normal = seededNormal(6);
const noise = x.map(() => 0.3 * normal());
const straight = { x, y: x.map((value, row) => 1 + value + noise[row]) };
const bent = { x, y: x.map((value, row) => 1 + value + 0.5 * Math.sin(2 * value) + noise[row]) };
const curve = (smoothness?: { df: number } | { penalty: number }): ModelSpec =>
  ({ response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "x", smoothness }] });
const first = (model: FittedModel) => modelReport(model).terms[0];

describe("A curve, not a line", () => {
  it("is found where the truth bends, and not where it is a line, though both are far from nothing", () => {
    const [one, other] = [first(fitModel(curve({ df: 5 }), bent)), first(fitModel(curve({ df: 5 }), straight))];
    expect(one.curveTest!.pValue).toBeLessThan(1e-5);
    expect(other.curveTest!.pValue).toBeGreaterThan(0.1);
    expect(other.test!.pValue).toBeLessThan(1e-30);
  });

  it("does not ask how steep the line is", () => {
    const steep = { x, y: x.map((value, row) => 1 + 40 * value + noise[row]) };
    const [one, other] = [first(fitModel(curve({ df: 5 }), straight)), first(fitModel(curve({ df: 5 }), steep))];
    expect(other.curveTest!.statistic).toBeCloseTo(one.curveTest!.statistic, 6);
    expect(other.test!.statistic).toBeGreaterThan(500 * one.test!.statistic);
  });

  it("takes one degree of freedom less than the curve's own test: the line's", () => {
    const { test, curveTest } = first(fitModel(curve({ df: 5 }), bent));
    expect(test!.referenceDegreesOfFreedom - curveTest!.referenceDegreesOfFreedom).toBeCloseTo(1, 8);
    expect(curveTest!.residualDegreesOfFreedom).toBe(test!.residualDegreesOfFreedom);
  });

  it("has nothing to test where the penalty is at its limit, and says so by 0 degrees of freedom and p = 1", () => {
    const { curveTest } = first(fitModel(curve({ penalty: 1e15 }), bent));
    expect(curveTest).toMatchObject({ statistic: 0, referenceDegreesOfFreedom: 0, pValue: 1 });
  });

  it("comes near to what lm says of a regression spline's bend at a penalty of nearly nothing (within a tenth)", () => {
    const model = fitModel(curve({ penalty: 1e-9 }), bent);
    const line = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "linear", column: "x" }] }, bent);
    const extra = 8;
    const f = ((line.deviance - model.deviance) / extra) / model.dispersion;
    const { curveTest } = first(model);
    expect(curveTest!.referenceDegreesOfFreedom).toBeCloseTo(extra, 3);
    expect(Math.abs(curveTest!.statistic / f - 1)).toBeLessThan(0.1);
  });

  it("rejects a true line about one time in twenty at given degrees of freedom: 400 draws, within four standard errors", () => {
    const draw = seededNormal(21);
    let rejected = 0;
    for (let turn = 0; turn < 400; turn++) {
      const y = x.map((value) => 2 - value + draw());
      rejected += first(fitModel(curve({ df: 4 }), { x, y })).curveTest!.pValue < 0.05 ? 1 : 0;
    }
    expect(Math.abs(rejected / 400 - 0.05)).toBeLessThan(4 * Math.sqrt((0.05 * 0.95) / 400));
  });

  it("is asked of penalised curves around a line, per level and times a number too, and of nothing else", () => {
    const asked = exampleNames.flatMap((name) => modelReport(exampleModel(name)).terms.map(({ id, curveTest }) => [name, id, curveTest !== null]));
    expect(asked.filter(([, , isAsked]) => isAsked).map(([name, id]) => `${String(name)}: ${String(id)}`)).toEqual([
      "curves and a factor: price", "a curve per level: price:area", "a curve times a number: price:temperature", "a surface: price",
      "a surface: temperature", "a moving level: price", "a curve per store: price", "two groupings: price",
    ]);
  });
});

describe("Every kind of term", () => {
  it.each(exampleNames)("in a model with %s has a test with finite numbers, and no reason against one", (name) => {
    for (const { id, test, testReason } of modelReport(exampleModel(name)).terms) {
      expect(testReason, id).toBe(null);
      expect(test!.pValue, id).toBeGreaterThanOrEqual(0);
      expect(test!.pValue, id).toBeLessThanOrEqual(1);
      expect(Number.isFinite(test!.statistic), id).toBe(true);
      // 0 where a penalty went to its limit: with slopes per store nothing is left for their levels here.
      expect(test!.referenceDegreesOfFreedom > 0 || test!.pValue === 1, id).toBe(true);
    }
  });

  it("finds the drivers that the rows were made from, and not a column of noise", () => {
    const rows = storeRows(3);
    const draw = seededNormal(77);
    const { terms } = modelReport(fitModel({
      response: "y", family: "gaussian",
      terms: [{ kind: "smooth", column: "price" }, { kind: "smooth", column: "noise" }, { kind: "random-effect", column: "lot" }, { kind: "factor", column: "promotion" }],
    }, { ...rows, noise: rows.y.map(draw), lot: rows.y.map((_, row) => `lot ${row % 7}`) }));
    expect(terms.map(({ test }) => test!.pValue < 0.01)).toEqual([true, false, false, true]);
  });

  it("has nothing to be judged by where the model reproduces the response exactly, whatever the response", () => {
    const reason = "the model reproduces the response exactly, which leaves no noise to judge by";
    for (const y of [x.map(() => 0), x.map(() => 7), x.map((value) => 3 - 2 * value)]) {
      for (const kind of ["linear", "smooth", "natural-spline"] as const) {
        const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind, column: "x", df: 3 } as ModelSpec["terms"][number]] }, { x, y });
        const report = modelReport(model);
        expect(report.terms[0], kind).toMatchObject({ test: null, curveTest: null, testReason: reason });
        expect(report.aic).toBe(null);
      }
    }
  });

  it("says why there is no test where there is none", () => {
    const twice = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "linear", column: "x" }, { kind: "linear", column: "x", id: "again" }] }, straight);
    expect(modelReport(twice).terms[1]).toMatchObject({ test: null, curveTest: null, testReason: "other terms reproduce it, and it is left out", concurvity: null });
    const lots = Array.from({ length: 400 }, (_, row) => `lot ${row % 160}`);
    const many = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "random-effect", column: "lots" }] }, { lots, y: lots.map(() => normal()) });
    expect(modelReport(many).terms[0]).toMatchObject({ test: null, testReason: "it has 160 coefficients, and tests are made of up to 150" });
  });
});
