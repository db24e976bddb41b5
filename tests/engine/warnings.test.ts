import { fitModel, modelReport, predict } from "@shared/engine";
import type { ModelSpec } from "@shared/engine";
import { expect, it } from "vitest";
import { gaussianSpec, quasiPoissonSpec, salesRows } from "./support/sales-rows";

const rows = salesRows(9);
const spec = (terms: ModelSpec["terms"], family: ModelSpec["family"] = "gaussian"): ModelSpec =>
  ({ response: family === "gaussian" ? "logUnits" : "units", family, terms });

it("Of columns that cannot be told apart the later one is left out, and the warning names both sides", () => {
  const data = { ...rows, euros: rows.price, dollars: rows.price.map((price) => 1.1 * price), deal: rows.price.map(() => 0) };
  const lines = ["euros", "dollars", "deal"].map((column) => ({ kind: "linear" as const, column }));
  const model = fitModel(spec(lines), data);
  expect(model.warnings).toEqual([
    {
      code: "columns-indistinguishable", term: "dollars",
      message: '"dollars" cannot be told apart from "euros" in these rows; it is left out (of such columns the later one in the specification goes).',
    },
    {
      code: "columns-indistinguishable", term: "deal",
      message: '"deal" cannot be told apart from a constant in these rows; it is left out (of such columns the later one in the specification goes).',
    },
  ]);
  const alone = fitModel(spec([lines[0]]), data);
  expect(Array.from(model.coefficients.slice(2))).toEqual([0, 0]);
  expect(model.coefficients[1]).toBeCloseTo(alone.coefficients[1], 9);
  expect(model.edf).toBe(2);
  expect(model.terms.map(({ edf }) => edf)).toEqual([1, 0, 0]);
});

it("A level that is another factor's level, and a line beside a curve of the same column, are found and named", () => {
  const copy = rows.promotion.map((level) => (level === "feature" ? "yes" : "no"));
  const model = fitModel(spec([
    { kind: "factor", column: "promotion", reference: "none" },
    { kind: "factor", column: "copy" },
    { kind: "linear", column: "price" },
    { kind: "smooth", column: "price", id: "price curve" },
  ]), { ...rows, copy });
  const messages = model.warnings.filter(({ code }) => code === "columns-indistinguishable").map(({ message }) => message);
  expect(messages[0]).toContain('"copy[yes]" cannot be told apart from "promotion[feature]"');
  expect(messages[1]).toContain('"price curve (straight line)" cannot be told apart from "price"');
  expect(messages).toHaveLength(2);
  expect(model.fitted.every(Number.isFinite)).toBe(true);
});

it("Fewer distinct values than splines keep the basis and say so", () => {
  const few = rows.price.map((price) => Math.round(price * 5) / 5);
  const model = fitModel(spec([{ kind: "smooth", column: "few", size: 12 }]), { ...rows, few });
  expect(model.warnings[0]).toEqual({
    code: "few-distinct-values", term: "few",
    message: 'Term "few" has 6 distinct values for a curve of size 12: between them its shape comes from the smoothness penalty alone.',
  });
  expect(model.terms[0].count).toBe(12);
});

it("A curve the data show as a line becomes one and is called one", () => {
  const price = rows.price.map((_, row) => 1 + row / 100);
  const logUnits = price.map((value, row) => 3 - 2 * value + 0.01 * (row % 2 === 0 ? 1 : -1));
  const model = fitModel(spec([{ kind: "smooth", column: "price" }]), { price, logUnits });
  expect(model.warnings).toEqual([
    { code: "straight-line", term: "price", message: 'Term "price": the data show a straight line; its penalty went to its limit.' },
  ]);
  expect(model.terms[0].edf).toBeCloseTo(1, 5);
});

it("A response without noise gives finite numbers and a warning", () => {
  const model = fitModel(gaussianSpec, { ...rows, logUnits: rows.price.map(() => 4) });
  expect(model.warnings.map(({ code }) => code)).toContain("perfect-fit");
  expect(Array.from(model.fitted).every((value) => Math.abs(value - 4) < 1e-9)).toBe(true);
  expect(model.covariance.every(Number.isFinite)).toBe(true);
});

it("A level that never sold is named, and its prediction is all but nothing", () => {
  const units = rows.units.map((value, row) => (rows.promotion[row] === "display" ? 0 : value));
  const model = fitModel(quasiPoissonSpec, { ...rows, units });
  expect(model.warnings.map(({ code, term }) => [code, term])).toContainEqual(["level-without-units", "promotion"]);
  const { mean, upper } = predict(model, { price: [1.5], yearFraction: [0.5], temperature: [10], promotion: ["display"] });
  expect(mean[0]).toBeLessThan(1e-3);
  expect(Number.isFinite(upper[0])).toBe(true);
});

it("A fit stopped early says so and returns its last numbers", () => {
  const model = fitModel(quasiPoissonSpec, rows, { maxIterations: 2 });
  expect(model.converged).toBe(false);
  expect(model.warnings).toContainEqual({
    code: "not-converged", message: "The fit did not come to rest in 2 iterations; its numbers are the last ones reached.",
  });
  expect(model.fitted.every(Number.isFinite)).toBe(true);
});

it("The report gives each term's share and the whole's, with the warnings", () => {
  const model = fitModel(quasiPoissonSpec, rows);
  const report = modelReport(model);
  expect(report.devianceExplained).toBeCloseTo(1 - model.deviance / model.nullDeviance, 12);
  expect(report.devianceExplained).toBeGreaterThan(0.5);
  expect(report.terms.map(({ id }) => id)).toEqual(["price", "yearFraction", "promotion", "temperature"]);
  expect(report.edf).toBeCloseTo(1 + report.terms.reduce((sum, { edf }) => sum + edf, 0), 10);
  const { contributions } = predict(model, rows);
  for (const { id, contributionRange } of report.terms) {
    expect(contributionRange[0]).toBeCloseTo(Math.min(...contributions[id]), 10);
    expect(contributionRange[1]).toBeCloseTo(Math.max(...contributions[id]), 10);
  }
});
