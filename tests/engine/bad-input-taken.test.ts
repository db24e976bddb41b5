import { fitModel, predict, termCurve } from "@shared/engine";
import type { ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { salesRows } from "./support/sales-rows";

/** What is taken although something is wrong with it: with a warning that says so, or a flag at the row. */
const count = 80;
const base = salesRows(6, count);
const rows: ModelData = {
  ...base,
  store: base.price.map((_, row) => ["north", "south", "east", "west"][row % 4]),
  deal: base.price.map((_, row) => Number(row % 5 === 0)),
  bought: base.price.map((price) => Number(price > 1.5)),
};
const gaussian = (...terms: TermSpec[]): ModelSpec => ({ response: "logUnits", family: "gaussian", terms });
const price: TermSpec = { kind: "smooth", column: "price", size: 6 };

describe("A model is fitted, with a warning,", () => {
  it("to shares that a driver separates, all numbers finite", () => {
    const model = fitModel({ response: "bought", family: "binomial", terms: [{ kind: "linear", column: "price" }] }, rows);
    const [warning] = model.warnings.filter(({ code }) => code === "separation");
    expect(warning.message).toMatch(/^The terms separate the response: \d+ rows have fitted shares of 0 or 1, and some coefficients have no finite value; their size and bands must not be read\.$/);
    expect([...model.fitted, ...model.coefficients, ...model.covariance].every(Number.isFinite)).toBe(true);
  });

  it("to a response that no driver separates, without that warning", () => {
    const model = fitModel({ response: "deal", family: "binomial", terms: [{ kind: "linear", column: "price" }] }, rows);
    expect(model.warnings).toEqual([]);
  });

  it.each(["quasi-poisson", "negative-binomial", "binomial"] as const)("stopped after one working model: %s says that it did not come to rest", (family) => {
    const response = family === "binomial" ? "deal" : "units";
    const model = fitModel({ response, family, terms: [price] }, rows, { maxIterations: 1 });
    expect([model.converged, model.iterations]).toEqual([false, 1]);
    expect(model.warnings).toContainEqual({
      code: "not-converged", message: "The fit did not come to rest in 1 iterations; its numbers are the last ones reached.",
    });
    expect(model.fitted.every(Number.isFinite)).toBe(true);
  });

  it("with a column left out that a factor's levels reproduce", () => {
    const model = fitModel(gaussian({ kind: "factor", column: "store" }, { kind: "linear", column: "isNorth" }), { ...rows, isNorth: base.price.map((_, row) => Number(row % 4 === 0)) });
    expect(model.warnings).toEqual([{
      code: "columns-indistinguishable", term: "isNorth",
      message: '"isNorth" cannot be told apart from "store[north]" in these rows; it is left out (of such columns the later one in the specification goes).',
    }]);
    expect(model.coefficients[model.terms[1].first]).toBe(0);
  });

  it.each<[string, TermSpec, string]>([
    ["a curve", { kind: "smooth", column: "few", size: 9 }, 'Term "few" has 5 distinct values for a curve of size 9: between them its shape comes from the smoothness penalty alone.'],
    ["a circle", { kind: "cyclic-smooth", column: "few", period: [0, 6], size: 9 }, 'Term "few" has 5 distinct values for a curve of size 9: between them its shape comes from the smoothness penalty alone.'],
    ["a curve per level", { kind: "smooth", column: "few", by: "promotion", size: 9 }, 'Term "few:promotion" has 5 distinct values for a curve of size 9: between them its shape comes from the smoothness penalty alone.'],
    ["a surface", { kind: "tensor-product", columns: ["few", "price"], sizes: [6, 5] }, 'Term "few:price" has 5 distinct values for a curve of size 6: between them its shape comes from the smoothness penalty alone.'],
  ])("with the whole basis of %s over few distinct values", (_name, term, message) => {
    const few = base.price.map((_, row) => row % 5);
    const model = fitModel(gaussian({ kind: "factor", column: "promotion" }, term), { ...rows, few });
    expect(model.warnings).toContainEqual({ code: "few-distinct-values", term: model.terms[1].id, message });
    expect(model.fitted.every(Number.isFinite)).toBe(true);
  });

  // Every row then lies at one of the points that parametrise the margin, whose mean is a combination of the values there.
  it("of a surface whose rows all lie at the points of a margin", () => {
    const depth = base.price.map((_, row) => (row % 4) / 10);
    const model = fitModel(gaussian({ kind: "tensor-product", columns: ["depth", "price"], sizes: [5, 5] }), { ...rows, depth });
    expect(model.converged).toBe(true);
    expect([...model.coefficients, ...model.covariance, model.criterion, ...model.terms[0].penalties].every(Number.isFinite)).toBe(true);
  });
});

describe("A group never seen is predicted by the chain's average, flagged, with the spread of groups around it:", () => {
  it.each<[string, TermSpec[]]>([
    ["a level per group", [price, { kind: "random-effect", column: "store" }]],
    ["a slope per group", [price, { kind: "random-effect", column: "store", by: "temperature" }]],
    ["a curve per group", [price, { kind: "factor-smooth", column: "price", group: "store", size: 4, smoothness: { penalty: 2 } }]],
  ])("%s", (_name, terms) => {
    const model = fitModel(gaussian(...terms), rows);
    const at = { price: [1.4, 1.4], temperature: [10, 10], store: ["centre", "north"] };
    const { contributions, outside, standardError, linearPredictor } = predict(model, at);
    const [common, { id }] = model.terms;
    expect([contributions[id][0], outside[id][0], outside[id][1]]).toEqual([0, 1, 0]);
    expect(linearPredictor[0]).toBeCloseTo(contributions.intercept[0] + contributions[common.id][0], 12);
    expect(standardError[0]).toBeGreaterThan(standardError[1]);
  });

  it("drawn among the known, a new group's level is zero", () => {
    const model = fitModel(gaussian(price, { kind: "random-effect", column: "store" }), rows);
    const curve = termCurve(model, "store", { at: ["centre", "north"] });
    expect([curve.estimate[0], curve.outside[0], curve.supportCount[0]]).toEqual([0, 1, 0]);
  });
});
