import type { FittedModel, TermSpec } from "@shared/engine";
import { isSame, isWithin, nestingFault } from "@shared/engine/inference/nesting";
import { describe, expect, it } from "vitest";
import { exampleModel } from "./support/example-models";

const line: TermSpec = { kind: "linear", column: "price" };
const curve: TermSpec = { kind: "smooth", column: "price" };
const spec = (term: TermSpec, perLevel = false) => ({ spec: term, perLevel });

describe("A term lies within another", () => {
  it.each<[string, TermSpec, TermSpec, boolean]>([
    ["a line within a curve", line, curve, false],
    ["a line within a natural spline", line, { kind: "natural-spline", column: "price", df: 3 }, false],
    ["a line within a local line", line, { kind: "local-regression", column: "price", span: 0.5 }, false],
    ["a line within a level for each value", line, { kind: "factor", column: "price" }, false],
    ["a line within a curve per level", line, { ...curve, by: "area" }, true],
    ["a line in the logarithm within a curve in the logarithm", { ...line, log: true }, { ...curve, log: true }, false],
    ["a curve within itself at another smoothness and name", curve, { ...curve, id: "price curve", smoothness: { df: 3 } }, false],
    ["splines within finer ones on knots that hold theirs", { ...curve, size: 6 }, { ...curve, size: 9 }, false],
    ["one curve within a curve per level", curve, { ...curve, by: "area" }, true],
    ["a falling curve within a curve of any shape", { ...curve, shape: "decreasing" }, curve, false],
    ["a factor within itself by another reference", { kind: "factor", column: "area" }, { kind: "factor", column: "area", reference: "coast" }, false],
    ["levels of stores within a factor", { kind: "random-effect", column: "store" }, { kind: "factor", column: "store" }, false],
    ["levels of stores within a curve per store", { kind: "random-effect", column: "store" }, { kind: "factor-smooth", column: "price", group: "store" }, false],
    ["slopes of stores within a curve per store", { kind: "random-effect", column: "store", by: "price" }, { kind: "factor-smooth", column: "price", group: "store" }, false],
    ["a moving level within itself", { kind: "random-walk", column: "week" }, { kind: "random-walk", column: "week" }, false],
  ])("%s", (_name, term, wider, perLevel) => {
    expect(isWithin(term, spec(wider, perLevel))).toBe(true);
  });
});

describe("A term does not lie within another", () => {
  it.each<[string, TermSpec, TermSpec, boolean]>([
    ["a line within a curve of another column", line, { ...curve, column: "depth" }, false],
    ["a line within a curve in the logarithm", line, { ...curve, log: true }, false],
    ["a line within a falling curve", line, { ...curve, shape: "decreasing" }, false],
    ["a line within a curve times a number", line, { ...curve, by: "amount" }, false],
    ["a line within a local mean", line, { kind: "local-regression", column: "price", span: 0.5, degree: 0 }, false],
    ["a line within an interaction", line, { kind: "tensor-product", columns: ["price", "depth"] }, false],
    ["a curve within a line", curve, line, false],
    ["splines within finer ones on other knots", { ...curve, size: 8 }, { ...curve, size: 10 }, false],
    ["a curve within a curve times a number", curve, { ...curve, by: "amount" }, false],
    ["a falling curve within a rising one", { ...curve, shape: "decreasing" }, { ...curve, shape: "increasing" }, false],
    ["a natural spline within one of more degrees of freedom: its knots are elsewhere", { kind: "natural-spline", column: "price", df: 3 }, { kind: "natural-spline", column: "price", df: 6 }, false],
    ["slopes of stores within a factor", { kind: "random-effect", column: "store", by: "price" }, { kind: "factor", column: "store" }, false],
    ["slopes of stores within curves per store in the logarithm", { kind: "random-effect", column: "store", by: "price" }, { kind: "factor-smooth", column: "price", group: "store", log: true }, false],
    ["levels of stores within curves per area", { kind: "random-effect", column: "store" }, { kind: "factor-smooth", column: "price", group: "area" }, false],
    ["a factor within levels of stores", { kind: "factor", column: "store" }, { kind: "random-effect", column: "store" }, false],
  ])("%s", (_name, term, wider, perLevel) => {
    expect(isWithin(term, spec(wider, perLevel))).toBe(false);
  });
});

describe("Sameness", () => {
  it("passes over names, smoothness, and what is said or left out by default", () => {
    expect(isSame({ ...curve, log: false, size: undefined }, { id: "p", kind: "smooth", smoothness: { penalty: 2 }, column: "price" })).toBe(true);
    expect(isSame(curve, { ...curve, size: 8 })).toBe(false);
  });
});

describe("What the fits remember of their rows", () => {
  const model = exampleModel("lines and a factor");
  it.each<[string, Partial<FittedModel>, string | null]>([
    ["the same model is a special case of itself", {}, null],
    ["another offset is told by the spec", { spec: { ...model.spec, offset: "exposure" } }, 'the smaller model\'s offset is none, the larger\'s "exposure"; they must be the same'],
    ["another family likewise", { spec: { ...model.spec, family: "log-gaussian" } }, 'the smaller model\'s family is "gaussian", the larger\'s "log-gaussian"; they must be the same'],
    ["rounding of the null deviance is no other response", { nullDeviance: model.nullDeviance * (1 + 1e-12) }, null],
    ["a null deviance that differs is", { nullDeviance: model.nullDeviance * 1.001 }, "the two models' null deviances differ, so they were fitted to other responses, weights or offsets"],
  ])("%s", (_name, change, fault) => {
    expect(nestingFault(model, { ...model, ...change })).toBe(fault);
  });
});
