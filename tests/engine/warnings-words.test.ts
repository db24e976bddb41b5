import { fitModel, modelReport } from "@shared/engine";
import type { Family, ModelData, TermSpec, WarningCode } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "./support/every-kind-rows";

/** Every warning a fit can have, by its words. */
const rows = everyKindRows(7, 80);
const numbers = rows.y.map((_, row) => row);
const messagesOf = (code: WarningCode, terms: TermSpec[], data: ModelData = rows, family: Family = "gaussian") =>
  fitModel(modelOf(family, terms), data).warnings.filter((warning) => warning.code === code).map(({ message }) => message);
const leftOut = (own: string, others: string) => `"${own}" cannot be told apart ${others} in these rows; it is left out (of such columns the later one in the specification goes).`;

const line: TermSpec = { kind: "linear", column: "price" };
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const given = { penalty: 1 } as const;
const derived = {
  ...rows, double: rows.price.map((value) => 2 * value), constant: numbers.map(() => 3), product: rows.depth.map((value, row) => value * rows.price[row]),
  feature: rows.promotion.map((level) => Number(level === "feature")), same: rows.promotion.map((level) => level.toUpperCase()),
};

describe("Columns that earlier ones reproduce are named, each with what it cannot be told from:", () => {
  it.each<[string, TermSpec[], string[]]>([
    ["a line and its double", [line, { kind: "linear", column: "double" }], [leftOut("double", 'from "price"')]],
    ["a constant", [{ kind: "linear", column: "constant" }], [leftOut("constant", "from a constant")]],
    ["a level's own column", [promotion, { kind: "linear", column: "feature" }], [leftOut("feature", 'from "promotion[feature]"')]],
    ["a factor by other names", [promotion, { kind: "factor", column: "same" }], [leftOut("same[FEATURE]", 'from "promotion[feature]"'), leftOut("same[NONE]", 'from "promotion[none]"')]],
    ["a curve's straight line", [line, { kind: "smooth", column: "price", id: "curve" }], [leftOut("curve (straight line)", 'from "price"')]],
    ["two curves of one column", [{ kind: "smooth", column: "price", id: "first" }, { kind: "smooth", column: "price", id: "second" }], [leftOut("second (straight line)", 'from "first (straight line)"')]],
    ["a curve times a number that is there already", [{ kind: "linear", column: "depth" }, { kind: "smooth", column: "price", by: "depth", id: "curve" }], [leftOut("curve (level)", 'from "depth"')]],
    ["its product with the column", [{ kind: "linear", column: "product" }, { kind: "smooth", column: "price", by: "depth", id: "curve" }], [leftOut("curve (straight line)", 'from "product", "curve (level)"')]],
    ["a natural spline's line", [line, { kind: "natural-spline", column: "price", df: 1, id: "spline" }], [leftOut("spline (1)", 'from "price"')]],
    ["one term of each, the later", [{ kind: "linear", column: "double" }, line], [leftOut("price", 'from "double"')]],
  ])("%s", (_name, terms, messages) => {
    expect(messagesOf("columns-indistinguishable", terms, derived)).toEqual(messages);
    const model = fitModel(modelOf("gaussian", terms), derived);
    expect(model.warnings.filter(({ code }) => code === "columns-indistinguishable").every(({ term }) => model.terms.some(({ id }) => id === term))).toBe(true);
  });
});

describe("A penalty that went to its limit is said:", () => {
  const still = { ...rows, price: numbers.map((row) => 1 + row / 100), y: numbers.map((row) => 4 - row / 100 + 0.01 * (row % 2 === 0 ? 1 : -1)) };

  it("of a curve that is a straight line, and of a circle that has no effect", () => {
    expect(messagesOf("straight-line", [{ kind: "smooth", column: "price" }], still)).toEqual(['Term "price": the data show a straight line; its penalty went to its limit.']);
    expect(messagesOf("straight-line", [line, { kind: "cyclic-smooth", column: "season", period: [0, 1] }], still)).toEqual(['Term "season": the data show no effect; its penalty went to its limit.']);
  });

  it("not of one that was given, nor of groups or weeks, which are shrunk and no curves", () => {
    expect(messagesOf("straight-line", [{ kind: "smooth", column: "price", smoothness: { penalty: 1e14 } }], still)).toEqual([]);
    expect(messagesOf("straight-line", [line, { kind: "random-effect", column: "store" }, { kind: "random-walk", column: "week" }], still)).toEqual([]);
  });
});

describe("What cannot be read is said:", () => {
  it.each(["quasi-poisson", "negative-binomial"] as const)("a level that never sold, by name: %s", (family) => {
    const none = { ...rows, counts: rows.counts.map((count, row) => (rows.promotion[row] === "display" ? 0 : count)) };
    expect(messagesOf("level-without-units", [promotion, line], none, family)).toEqual([
      'Level "display" of factor "promotion" has only zeros: its effect is "none sold", and its coefficient has no meaningful size.',
    ]);
    expect(messagesOf("level-without-units", [promotion, line], rows, family)).toEqual([]);
  });

  it("shares that a driver separates, one or many of them", () => {
    const sharp = { ...rows, share: rows.price.map((price) => Number(price > 1.5)) };
    expect(messagesOf("separation", [line], sharp, "binomial")[0]).toMatch(/^The terms separate the response: \d+ rows have fitted shares of 0 or 1, and some coefficients have no finite value; their size and bands must not be read\.$/);
    const alone = { ...rows, promotion: rows.promotion.map((_level, row) => (row === 3 ? "once" : "none")), share: rows.share.map((value, row) => (row === 3 ? 1 : Math.min(0.9, Math.max(0.1, value)))) };
    expect(messagesOf("separation", [promotion], alone, "binomial")).toEqual([
      "The terms separate the response: 1 row has a fitted share of 0 or 1, and some coefficients have no finite value; their size and bands must not be read.",
    ]);
    expect(messagesOf("separation", [line], rows, "binomial")).toEqual([]);
  });

  it.each(["gaussian", "log-gaussian"] as const)("a response without noise: %s", (family) => {
    const exact = { ...rows, y: rows.price.map((value) => 2 - value), sales: rows.price.map((value) => Math.exp(2 - value)) };
    expect(messagesOf("perfect-fit", [line], exact, family)).toEqual(["The model reproduces the response exactly; its bands say nothing about new rows."]);
    expect(messagesOf("perfect-fit", [line], rows, family)).toEqual([]);
  });

  it.each([1, 2, 3])("a fit that was stopped after %i working models", (maxIterations) => {
    const model = fitModel(modelOf("binomial", [promotion, { kind: "smooth", column: "price" }]), rows, { maxIterations });
    expect([model.converged, model.iterations]).toEqual([false, maxIterations]);
    expect(model.warnings.filter(({ code }) => code === "not-converged")).toEqual([
      { code: "not-converged", message: `The fit did not come to rest in ${maxIterations} iterations; its numbers are the last ones reached.` },
    ]);
  });

  it.each([0, -3, 1.5, Number.NaN])("no limit of %s working models", (maxIterations) => {
    expect(() => fitModel(modelOf("binomial", [promotion]), rows, { maxIterations })).toThrow(`maxIterations is ${maxIterations}; it must be a whole number of at least 1.`);
  });

  it("few distinct values under a curve, once for each column that has few", () => {
    const few = { ...rows, few: numbers.map((row) => row % 5), some: numbers.map((row) => row % 6) };
    expect(messagesOf("few-distinct-values", [{ kind: "smooth", column: "few", size: 6, smoothness: given }, { kind: "tensor-product", columns: ["few", "some"], sizes: [6, 7], smoothness: given }], few)).toEqual([
      'Term "few" has 5 distinct values for a curve of size 6: between them its shape comes from the smoothness penalty alone.',
      'Term "few:some" has 5 distinct values for a curve of size 6: between them its shape comes from the smoothness penalty alone.',
      'Term "few:some" has 6 distinct values for a curve of size 7: between them its shape comes from the smoothness penalty alone.',
    ]);
  });
});

it("The report adds terms that others reproduce to the model's own warnings, and leaves those as they were", () => {
  const near = { ...rows, twin: rows.price.map((value, row) => value + 1e-3 * ((row * 13) % 7)) };
  const model = fitModel(modelOf("gaussian", [line, { kind: "linear", column: "twin" }]), near);
  const before = structuredClone(model.warnings);
  const added = modelReport(model).warnings.slice(model.warnings.length);
  expect(added.map(({ code, term }) => [code, term])).toEqual([["concurvity", "price"], ["concurvity", "twin"]]);
  expect(added[0].message).toBe('Other terms reproduce 99 % of what "price" shows ("twin" alone 99 %): these data can hardly tell them apart.');
  expect(model.warnings).toEqual(before);
});
