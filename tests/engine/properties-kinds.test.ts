import { fitModel, parseModel, predict, serialiseModel } from "@shared/engine";
import type { TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf, withAuto } from "./support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "./support/measures";

const rows = everyKindRows(4);
const count = rows.y.length;
const numbers = rows.y.map((_, row) => row);
const sumOf = (parts: Float64Array[], row: number) => parts.reduce((sum, part) => sum + part[row], 0);

describe.each(Object.entries(everyKind))("A model with a %s", (name, terms) => {
  const fitted = families.map((family) => ({ family, model: fitModel(modelOf(family, withAuto(terms)), rows) }));
  const [{ model: normal }] = fitted;

  it("has contributions that sum to the linear predictor, for every family", () => {
    for (const { model } of fitted) {
      const { contributions, linearPredictor, mean } = predict(model, rows);
      const parts = Object.values(contributions);
      expect(largestDifference(linearPredictor, numbers.map((row) => sumOf(parts, row)))).toBeLessThan(1e-10);
      expect(largestRelativeDifference(mean, model.fitted)).toBeLessThan(1e-10);
    }
  });

  it("is the same after its text is read, for every family", () => {
    for (const { model } of fitted) {
      const read = parseModel(serialiseModel(model));
      expect(read).toEqual(model);
      expect(predict(read, rows)).toEqual(predict(model, rows));
    }
  });

  it("moves only its intercept when a constant is added to the response", () => {
    const moved = fitModel(modelOf("gaussian", withAuto(terms)), { ...rows, y: rows.y.map((value) => value + 100) });
    expect(moved.coefficients[0] - normal.coefficients[0]).toBeCloseTo(100, 7);
    // Penalties rest to 1e-7 of a gradient, which leaves coefficients about 1e-6.
    expect(largestDifference(moved.coefficients.slice(1), normal.coefficients.slice(1))).toBeLessThan(2e-6);
  });

  it("does not depend on the order of rows", () => {
    const order = numbers.map((row) => (row * 37 + 11) % count);
    const other = fitModel(modelOf("gaussian", terms), inOrder(rows, order));
    const model = fitModel(modelOf("gaussian", terms), rows);
    // Sums in another order: rounding alone, at given penalties.
    expect(largestDifference(other.fitted, order.map((row) => model.fitted[row]))).toBeLessThan(1e-9);
  });

  it("does not depend on the units of its columns", () => {
    const scaled = { ...rows, price: rows.price.map((value) => 250 * value), temperature: rows.temperature.map((value) => 32 + 1.8 * value), depth: rows.depth.map((value) => 100 * value) };
    // A slope and a curve times a number are per unit of it, and so is a penalty given.
    const other = fitModel(modelOf("gaussian", withAuto(terms)), scaled);
    expect(largestDifference(other.fitted, normal.fitted)).toBeLessThan(1e-6);
  });

  it.each(families)("counts rows given twice as rows of twice the weight: %s", (family) => {
    const twice = inOrder(rows, [...numbers, ...numbers]);
    const weight = rows.y.map(() => 2);
    const doubled = fitModel(modelOf(family, terms), twice);
    const weighted = fitModel(modelOf(family, terms, { weights: "weight" }), { ...rows, weight });
    expect(largestDifference(doubled.coefficients, weighted.coefficients)).toBeLessThan(name === "local regression" ? 1e-5 : 1e-6);
  });
});

describe("Of all kinds of terms at once", () => {
  const terms: TermSpec[] = [
    { kind: "smooth", column: "price", log: true, size: 7 }, { kind: "factor", column: "promotion" }, { kind: "linear", column: "depth" },
    { kind: "cyclic-smooth", column: "season", period: [0, 1] }, { kind: "random-walk", column: "week" },
    { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5 }, { kind: "tensor-product", columns: ["depth", "temperature"] },
    { kind: "random-effect", column: "store", by: "depth", id: "depth by store" }, { kind: "natural-spline", column: "temperature", df: 3 },
  ];

  it.each(families)("contributions sum to the predictor, and the text is the model: %s", (family) => {
    const model = fitModel(modelOf(family, terms), rows);
    const { contributions, linearPredictor } = predict(model, rows);
    const parts = Object.values(contributions);
    expect(largestDifference(linearPredictor, numbers.map((row) => sumOf(parts, row)))).toBeLessThan(1e-10);
    expect(Object.keys(contributions)).toEqual(["intercept", "price", "promotion", "depth", "season", "week", "price:store", "depth:temperature", "depth by store", "temperature", "offset"]);
    expect(parseModel(serialiseModel(model))).toEqual(model);
  });
});
