import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { concurvity } from "@shared/engine/inference/concurvity";
import { informationTimes, projectedSquares } from "@shared/engine/inference/projection";
import { inverse, Matrix, solve } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { denseOf } from "./support/dense";
import { exampleModel, exampleNames, partsOf, storeRows } from "./support/example-models";

const normal = seededNormal(12);
const n = 90;
const rows = (() => {
  const a = Array.from({ length: n }, () => normal());
  const b = a.map((value) => 0.6 * value + normal());
  const c = a.map((value, row) => value - 0.5 * b[row] + 0.8 * normal());
  const promotion = b.map((value) => (value > 0.5 ? "yes" : "no"));
  const weight = a.map((_, row) => 0.5 + (row % 4));
  return { a, b, c, promotion, weight, y: a.map((value, row) => 1 + value + b[row] - c[row] + 0.3 * normal()) };
})();
const lines: ModelSpec["terms"] = ["a", "b", "c"].map((column) => ({ kind: "linear", column }));
const shareOf = (model: FittedModel, id: string) => modelReport(model).terms.find((term) => term.id === id)?.concurvity ?? Number.NaN;

/** R squared of one column on others by weighted least squares, written out. */
function rSquared(column: number[], others: number[][], weights: number[]): number {
  const roots = weights.map(Math.sqrt);
  const design = new Matrix(column.map((_, row) => [roots[row], ...others.map((other) => roots[row] * other[row])]));
  const response = Matrix.columnVector(column.map((value, row) => roots[row] * value));
  const residual = response.clone().sub(design.mmul(solve(design, response)));
  const mean = column.reduce((sum, value, row) => sum + weights[row] * value, 0) / weights.reduce((sum, value) => sum + value, 0);
  const total = column.reduce((sum, value, row) => sum + weights[row] * (value - mean) ** 2, 0);
  return 1 - residual.to1DArray().reduce((sum, value) => sum + value * value, 0) / total;
}

describe("Concurvity", () => {
  it.each([undefined, "weight"])("of straight lines is R squared on the other columns, written out (1e-9; weights: %s)", (weights) => {
    const model = fitModel({ response: "y", family: "gaussian", weights, terms: lines }, rows);
    const weighing = weights === undefined ? rows.a.map(() => 1) : rows.weight;
    expect(shareOf(model, "a")).toBeCloseTo(rSquared(rows.a, [rows.b, rows.c], weighing), 9);
    expect(shareOf(model, "b")).toBeCloseTo(rSquared(rows.b, [rows.a, rows.c], weighing), 9);
  });

  it("counts factors among the others", () => {
    const model = fitModel({ response: "y", family: "gaussian", terms: [lines[1], { kind: "factor", column: "promotion" }] }, rows);
    const dummy = rows.promotion.map((level) => (level === "yes" ? 1 : 0));
    expect(shareOf(model, "b")).toBeCloseTo(rSquared(rows.b, [dummy], rows.a.map(() => 1)), 9);
    expect(shareOf(model, "promotion")).toBeCloseTo(rSquared(dummy, [rows.b], rows.a.map(() => 1)), 9);
  });

  it("of curves is that of their fitted values on the others' columns: next to all for a curve of nearly the same driver", () => {
    const near = { ...rows, twin: rows.a.map((value) => value + 0.02 * normal()) };
    const curves: ModelSpec["terms"] = ["a", "twin"].map((column) => ({ kind: "smooth", column }));
    const model = fitModel({ response: "y", family: "gaussian", terms: curves }, near);
    expect(shareOf(model, "a")).toBeGreaterThan(0.98);
    expect(shareOf(fitModel({ response: "y", family: "gaussian", terms: [curves[0]] }, rows), "a")).toBe(0);
  });

  it("stays between 0 and 1 in every kind of model", () => {
    for (const name of exampleNames) {
      const model = exampleModel(name);
      for (const { id, concurvity: share, edf } of modelReport(model).terms) {
        if (edf < 1e-4) continue;
        expect(share, `${name}: ${id}`).toBeGreaterThanOrEqual(0);
        expect(share, `${name}: ${id}`).toBeLessThanOrEqual(1);
      }
    }
  });

  it("is null for an estimate of zero", () => {
    const flat = { ...rows, y: rows.a.map((value, row) => value + 0.1 * ((row % 2) - 0.5)) };
    const season = rows.a.map((_, row) => ((row * 11) % 45) / 45);
    const model = fitModel({ response: "y", family: "gaussian", terms: [lines[0], { kind: "cyclic-smooth", column: "season", period: [0, 1], smoothness: { penalty: 1e15 } }] }, { ...flat, season });
    expect(modelReport(model).terms.map(({ concurvity: share }) => share === null)).toEqual([false, true]);
  });

  it("is no rounding's doing: 0 for a term alone, null for one that is nothing beside its own mean", () => {
    const level = rows.a.map(() => 7);
    for (const kind of ["linear", "smooth"] as const) {
      const report = modelReport(fitModel({ response: "level", family: "gaussian", terms: [{ kind, column: "a" }] }, { ...rows, level }));
      expect([0, null]).toContain(report.terms[0].concurvity);
      expect(report.warnings.filter(({ code }) => code === "concurvity")).toEqual([]);
    }
    const promoted = modelReport(fitModel({ response: "y", family: "gaussian", terms: [{ kind: "factor", column: "promotion" }] }, rows));
    expect(promoted.terms[0].concurvity).toBe(0);
  });

  it("leaves a chain's own deviations by store out, and lets levels of stores reproduce at their penalty's price only", () => {
    expect(shareOf(exampleModel("a curve per store", { terms: exampleModel("a curve per store").spec.terms.slice(0, 2) }), "price")).toBe(0);
    const each = storeRows(3);
    const ofStore = each.store.map((store) => Number(store.slice(1)));
    const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "linear", column: "size" }, { kind: "random-effect", column: "store" }] }, { ...each, size: ofStore, y: ofStore.map((value) => value + normal()) });
    expect(shareOf(model, "size")).toBeGreaterThan(0);
    expect(shareOf(model, "size")).toBeLessThan(0.9);
  });
});

describe("A warning of concurvity", () => {
  const close = { ...rows, close: rows.a.map((value) => value + 0.15 * normal()) };
  const model = fitModel({ response: "y", family: "gaussian", terms: [lines[0], { kind: "linear", column: "close" }, lines[1]] }, close);
  const { warnings } = modelReport(model);

  it("comes above 0.8 and names the term and the single other that reproduces most", () => {
    const { information, places } = partsOf(model);
    const { shares } = concurvity(model, information, places);
    const alone = rSquared(rows.a, [close.close], rows.a.map(() => 1));
    expect(warnings.map(({ code, term }) => [code, term])).toEqual([["concurvity", "a"], ["concurvity", "close"]]);
    expect(warnings[0].message).toBe(
      `Other terms reproduce ${Math.floor(100 * shares[0]!)} % of what "a" shows ("close" alone ${Math.floor(100 * alone)} %): these data can hardly tell them apart.`,
    );
    expect(shares[2]).toBeLessThan(0.8);
  });

  it("is the report's, not the model's", () => {
    expect(model.warnings).toEqual([]);
  });
});

describe.each(exampleNames)("Projections in a model with %s", (name) => {
  const { information, posterior } = partsOf(exampleModel(name));
  const dense = denseOf(information, posterior);
  const grouped = new Float64Array(dense.groupCount).map((_, k) => Math.sin(k + 1));
  const shared = new Float64Array(information.size).map((_, k) => Math.cos(3 * k));

  it("multiply by the information as written out", () => {
    const product = informationTimes(information, { shared, grouped });
    const expected = dense.information.mmul(Matrix.columnVector([...grouped, ...shared])).to1DArray();
    const scale = Math.max(...expected.map(Math.abs));
    [...product.grouped, ...product.shared].forEach((value, k) => expect(Math.abs(value - expected[k])).toBeLessThan(1e-10 * scale));
  });

  it("have the squares of a ridge regression on some coordinates, written out", () => {
    const width = information.groups?.size ?? 0;
    const target = {
      shared: [0, 1].map((position) => ({ position, ridge: 0.5 * position })),
      grouped: width > 0 ? [{ position: 0, ridge: 0.7 }] : [],
    };
    const gradient = informationTimes(information, { shared, grouped });
    const lines = [...Array.from({ length: dense.groupCount }, (_, line) => line).filter((line) => line % width === 0), dense.groupCount, dense.groupCount + 1];
    const matrix = new Matrix(lines.map((row) => lines.map((column) => dense.information.get(row, column)
      + (row !== column ? 0 : row < dense.groupCount ? 0.7 : row === dense.groupCount ? 0 : 0.5))));
    const u = Matrix.columnVector(lines.map((line) => (line < dense.groupCount ? gradient.grouped[line] : gradient.shared[line - dense.groupCount])));
    const expected = u.transpose().mmul(inverse(matrix)).mmul(u).get(0, 0);
    expect(Math.abs(projectedSquares(information, gradient, target) / expected - 1)).toBeLessThan(1e-8);
  });
});
