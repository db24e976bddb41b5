import { fitModel } from "@shared/engine";
import type { FittedModel, ModelData, ModelSpec } from "@shared/engine";
import { influence } from "@shared/engine/predict/influence";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { exampleModel, exampleNames, storeRows } from "./support/example-models";
import { rResults } from "./support/r-results";

const { rows } = rResults.influence;
const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;
const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0);

describe("Leverage, Cook's distance and standardised residuals are R's (R 4.2.2)", () => {
  // hatvalues, cooks.distance and rstandard(type = "pearson"); glm stops at a change of deviance of 1e-8, so its are looser.
  it.each<{ name: "line" | "counts" | "shares"; spec: ModelSpec; within: number }>([
    { name: "line", within: 1e-8, spec: { response: "logUnits", family: "gaussian", weights: "weight", terms: [{ kind: "linear", column: "price", log: true }, promotion] } },
    { name: "counts", within: 1e-6, spec: { response: "units", family: "quasi-poisson", terms: [{ kind: "linear", column: "price", log: true }, promotion] } },
    { name: "shares", within: 1e-6, spec: { response: "share", family: "binomial", weights: "trials", terms: [{ kind: "linear", column: "price" }] } },
  ])("$name", ({ name, spec, within }) => {
    const found = influence(fitModel(spec, rows), rows);
    const expected = rResults.influence[name];
    expect(largestDifference(found.leverage, expected.leverage)).toBeLessThan(within);
    expect(largestDifference(found.cooksDistance, expected.cooksDistance)).toBeLessThan(within);
    expect(largestDifference(found.standardisedResidual, expected.standardised)).toBeLessThan(within);
  });
});

describe.each(exampleNames)("Leverage in a model with %s", (name) => {
  const model = exampleModel(name);
  const { leverage, cooksDistance } = influence(model, storeRows(3));

  it("sums to the degrees of freedom, each row's from 0 to 1", () => {
    expect(sum(leverage)).toBeCloseTo(model.edf, 5);
    expect(Math.min(...leverage)).toBeGreaterThan(0);
    expect(Math.max(...leverage)).toBeLessThanOrEqual(1);
    expect(cooksDistance.every((distance) => Number.isFinite(distance) && distance >= 0)).toBe(true);
  });
});

describe("What leverage means", () => {
  const given: ModelSpec = { response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "price", size: 7, smoothness: { penalty: 0.5 } }, promotion] };
  const data = storeRows(3, 40);

  it("is how far a row's fitted value follows its response (penalty given; 1e-8)", () => {
    const { leverage } = influence(fitModel(given, data), data);
    const before = fitModel(given, data).fitted;
    for (const row of [0, 11, 39]) {
      const moved = fitModel(given, { ...data, y: data.y.map((value, k) => (k === row ? value + 1 : value)) });
      expect(moved.fitted[row] - before[row]).toBeCloseTo(leverage[row], 8);
    }
  });

  it("gives the residual a row would have if it were left out: residual / (1 - leverage)", () => {
    // Weight 1e-9 leaves the row out but keeps knots and centring as they are.
    const weighted = { ...given, weights: "w" };
    const model = fitModel(given, data);
    const { leverage } = influence(model, data);
    const without = fitModel(weighted, { ...data, w: data.y.map((_, row) => (row === 5 ? 1e-9 : 1)) });
    expect(data.y[5] - without.fitted[5]).toBeCloseTo((data.y[5] - model.fitted[5]) / (1 - leverage[5]), 6);
  });

  it("finds a row set apart: the largest distance, above 1", () => {
    const apart = { ...data, temperature: data.temperature.map((value, row) => (row === 17 ? 90 : value)), y: data.y.map((value, row) => (row === 17 ? value + 9 : value)) };
    const line: ModelSpec = { response: "y", family: "gaussian", terms: [{ kind: "linear", column: "temperature" }] };
    const { cooksDistance, leverage } = influence(fitModel(line, apart), apart);
    expect(cooksDistance.indexOf(Math.max(...cooksDistance))).toBe(17);
    expect(cooksDistance[17]).toBeGreaterThan(1);
    expect(leverage.indexOf(Math.max(...leverage))).toBe(17);
  });

  it("is nothing for a row of weight 0, which is judged all the same", () => {
    const data0: ModelData = { ...data, w: data.y.map((_, row) => (row === 3 ? 0 : 1)) };
    const found = influence(fitModel({ ...given, weights: "w" }, data0), data0);
    expect([found.leverage[3], found.cooksDistance[3]]).toEqual([0, 0]);
    expect(found.standardisedResidual[3]).not.toBe(0);
  });

  it("is 1 for a row that alone has its level, with finite numbers beside it", () => {
    const lone = { ...data, area: data.area.map((area, row) => (row === 8 ? "island" : area)) };
    const found = influence(fitModel({ response: "y", family: "gaussian", terms: [{ kind: "factor", column: "area" }] }, lone), lone);
    expect(found.leverage[8]).toBeCloseTo(1, 9);
    expect(Number.isFinite(found.standardisedResidual[8]) && Number.isFinite(found.cooksDistance[8])).toBe(true);
  });
});

describe("Influence that cannot be told is refused", () => {
  const data = storeRows(3);
  const model = exampleModel("lines and a factor");
  const exact = { x: [1, 2, 3, 4], y: [2, 4, 6, 8] };
  it.each<[string, FittedModel, ModelData, string]>([
    ["other rows", model, storeRows(3, 12), "The data have 12 rows, the model was fitted to 150; influence is of the rows fitted to."],
    ["a perfect fit", fitModel({ response: "y", family: "gaussian", terms: [{ kind: "linear", column: "x" }] }, exact), exact, "The model reproduces the response exactly; no row's influence can be told."],
    ["no working model", { ...model, information: null }, data, "A model with local regression has no working model whose rows' influence could be told."],
  ])("%s", (_name, of, given, message) => {
    expect(() => influence(of, given)).toThrow(message);
  });
});
