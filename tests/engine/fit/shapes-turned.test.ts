import { fitModel, predict, termCurve } from "@shared/engine";
import type { Family, FittedModel, ModelData, Shape, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, families, inOrder, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** Curves of a given shape under changes that must turn the shape, or leave it. */
const rows = everyKindRows(37, 110);
const numbers = rows.y.map((_, row) => row);
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const priceOf = (shape: Shape, change: Partial<Extract<TermSpec, { kind: "smooth" }>> = {}): TermSpec =>
  ({ kind: "smooth", column: "price", size: 8, shape, smoothness: { penalty: 0.4 }, ...change });
const other: Record<Shape, Shape> = { decreasing: "increasing", increasing: "decreasing" };
const shapes: Shape[] = ["decreasing", "increasing"];
const each = families.flatMap((family) => shapes.map((shape) => ({ family, shape })));
const predictorOf = (model: FittedModel, data: ModelData) => predict(model, data).linearPredictor;
/** Rounding of a curve that its shape leaves flat. */
const flat = 1e-14;
const tolerance = (family: Family) => (family === "gaussian" || family === "log-gaussian" ? 1e-8 : 1e-5);

describe("A curve held to a shape", () => {
  it.each(each)("turned round with its column is the same with the other shape: $family, $shape", ({ family, shape }) => {
    const turned = { ...rows, price: rows.price.map((value) => 10 - 3 * value) };
    const [one, two] = [fitModel(modelOf(family, [promotion, priceOf(shape)]), rows), fitModel(modelOf(family, [promotion, priceOf(other[shape])]), turned)];
    expect(largestDifference(predictorOf(two, turned), predictorOf(one, rows))).toBeLessThan(tolerance(family));
    expect(two.edf).toBeCloseTo(one.edf, 5);
  });

  it.each(shapes.flatMap((shape) => [
    { family: "gaussian" as const, shape, turn: (value: number) => -value },
    { family: "log-gaussian" as const, shape, turn: (value: number) => 1 / value },
    { family: "binomial" as const, shape, turn: (value: number) => 1 - value },
  ]))("turned over with its response is the same with the other shape: $family, $shape", ({ family, shape, turn }) => {
    const spec = modelOf(family, [promotion, priceOf(shape)]);
    const column = spec.response as "y";
    const over = { ...rows, [column]: rows[column].map(turn) };
    const [one, two] = [fitModel(spec, rows), fitModel(modelOf(family, [promotion, priceOf(other[shape])]), over)];
    expect(largestDifference(predictorOf(two, over).map((value) => -value), predictorOf(one, rows))).toBeLessThan(tolerance(family));
  });

  it.each(each)("does not depend on the order of rows, or of terms: $family, $shape", ({ family, shape }) => {
    const order = numbers.map((row) => (row * 37 + 11) % 110);
    const one = predictorOf(fitModel(modelOf(family, [promotion, priceOf(shape)]), rows), rows);
    const two = predictorOf(fitModel(modelOf(family, [promotion, priceOf(shape)]), inOrder(rows, order)), rows);
    const three = predictorOf(fitModel(modelOf(family, [priceOf(shape), promotion]), rows), rows);
    expect(largestDifference(two, one)).toBeLessThan(tolerance(family));
    expect(largestDifference(three, one)).toBeLessThan(tolerance(family));
  });

  it.each(each)("never goes the wrong way, on 500 points and beyond both ends, per level too: $family, $shape", ({ family, shape }) => {
    for (const terms of [[promotion, priceOf(shape)], [promotion, priceOf(shape, { by: "promotion" })], [promotion, priceOf(shape, { log: true, smoothness: "auto" })]]) {
      const model = fitModel(modelOf(family, terms), rows);
      const { id, basis } = model.terms[1];
      for (const group of basis.kind === "levelled-smooth" ? basis.levels : [undefined]) {
        const { estimate } = termCurve(model, id, { at: Array.from({ length: 500 }, (_, k) => 0.5 + k / 200), group });
        const range = Math.max(...estimate) - Math.min(...estimate);
        const sign = shape === "decreasing" ? 1 : -1;
        for (let k = 1; k < 500; k++) expect(sign * (estimate[k] - estimate[k - 1])).toBeLessThanOrEqual(1e-12 * range + flat);
      }
    }
  });

  it.each(each)("fits no better than the free one, and never worse than none: $family, $shape", ({ family, shape }) => {
    const of = (terms: TermSpec[]) => fitModel(modelOf(family, terms), rows);
    const { shape: _shape, ...free } = priceOf(shape) as Extract<TermSpec, { kind: "smooth" }>;
    const penalised = (model: FittedModel) => model.deviance;
    const held = of([promotion, priceOf(shape)]);
    expect(penalised(held)).toBeGreaterThanOrEqual(penalised(of([promotion, free])) * (1 - 1e-6));
    expect(held.edf).toBeLessThanOrEqual(of([promotion, free]).edf + 1e-6);
    if (family !== "negative-binomial") expect(penalised(held)).toBeLessThanOrEqual(penalised(of([promotion])) * (1 + 1e-6));
  });

  it("against the data's whole direction is flat: nothing but the level is left", () => {
    const model = fitModel(modelOf("gaussian", [priceOf("increasing", { smoothness: "auto" })]), { ...rows, y: rows.price.map((value, row) => 9 - 4 * value + 0.01 * (row % 3)) });
    expect(Math.max(...termCurve(model, "price").estimate.map(Math.abs))).toBeLessThan(1e-9);
    expect(model.terms[0].edf).toBeLessThan(1e-3);
    expect(model.terms[0].edf).toBeGreaterThanOrEqual(-1e-9);
  });

  it.each(shapes)("of weights two is that of rows twice: %s", (shape) => {
    const spec = modelOf("gaussian", [promotion, priceOf(shape)]);
    const twice = fitModel(spec, inOrder(rows, [...numbers, ...numbers]));
    const heavy = fitModel({ ...spec, weights: "weight" }, { ...rows, weight: numbers.map(() => 2) });
    expect(largestDifference(heavy.coefficients, twice.coefficients)).toBeLessThan(1e-8);
  });
});
