import { autocorrelation, compareModels, covarianceQuadratic, extendModel, fitModel, modelReport, predict, simultaneousQuantile, termCurve } from "@shared/engine";
import type { Family, FittedModel, ModelData, TermSpec } from "@shared/engine";
import { EigenvalueDecomposition, Matrix, inverse } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { basisRows } from "@shared/engine/basis/term-basis";
import { gatherRow, roomForRow } from "@shared/engine/linalg/sparse-rows";
import { everyKind, everyKindRows, families, modelOf, withAuto } from "../support/every-kind-rows";
import { seededNormal, seededUniform } from "../support/generator";
import { denseOf, penaltyMatrix } from "./support/dense";
import { partsOf } from "./support/example-models";

const rows = everyKindRows(23, 120);
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 7 };
const line: TermSpec = { kind: "linear", column: "price", log: true };
const promotion: TermSpec = { kind: "factor", column: "promotion" };

/** 2 tr(F) - tr(FF) by dense matrices. */
function rankOf(model: FittedModel): number {
  const { information, posterior } = partsOf(model);
  const dense = denseOf(information, posterior);
  const whole = Matrix.add(dense.information, penaltyMatrix(dense));
  const shrink = inverse(whole).mmul(dense.information);
  return 2 * shrink.trace() - shrink.mmul(shrink).trace();
}

const pairs: [string, TermSpec[], TermSpec[]][] = [
  ["nothing and a curve", [], [price]],
  ["a line and a curve", [line, promotion], [price, promotion]],
  ["a curve and one per level", [promotion, price], [promotion, { ...price, by: "promotion" }]],
  ["a curve and one with levels of stores", [price], [price, { kind: "random-effect", column: "store" }]],
  ["levels of stores and their curves", [price, { kind: "random-effect", column: "store" }], [price, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5 }]],
  ["a line and a natural spline", [line], [{ kind: "natural-spline", column: "price", log: true, df: 4 }]],
  ["main effects and their interaction", [price, { kind: "linear", column: "temperature" }], [price, { kind: "linear", column: "temperature" }, { kind: "tensor-product", columns: ["price", "temperature"] }]],
];

describe.each(families)("Comparing two %s models", (family: Family) => {
  it.each(pairs)("is by differences written out: %s", (_name, less, more) => {
    const [smaller, larger] = [less, more].map((terms) => fitModel(modelOf(family, terms), rows));
    const { statistic, degreesOfFreedom, residualDegreesOfFreedom, distribution, aicDifference, pValue } = compareModels(smaller, larger);
    expect(degreesOfFreedom).toBeCloseTo(rankOf(larger) - rankOf(smaller), 5);
    const isKnown = family === "binomial" || family === "negative-binomial";
    expect([distribution, residualDegreesOfFreedom]).toEqual(isKnown ? ["chi-square", null] : ["F", 120 - larger.edf]);
    const gain = family === "negative-binomial" ? 2 * ((larger.logLikelihood ?? 0) - (smaller.logLikelihood ?? 0)) : smaller.deviance - larger.deviance;
    if (degreesOfFreedom >= 0.5) expect(statistic).toBeCloseTo(isKnown ? gain : gain / degreesOfFreedom / larger.dispersion, 6);
    else expect([statistic, pValue]).toEqual([null, null]);
    const [one, other] = [smaller, larger].map((model) => modelReport(model).aic);
    if (family === "quasi-poisson") expect([one, other, aicDifference]).toEqual([null, null, null]);
    else expect(aicDifference).toBeCloseTo((other ?? 0) - (one ?? 0), 9);
  });

  it("of itself finds nothing to judge", () => {
    const model = fitModel(modelOf(family, [price, promotion]), rows);
    const { statistic, pValue, degreesOfFreedom, aicDifference, verdict } = compareModels(model, model);
    expect([statistic, pValue, degreesOfFreedom]).toEqual([null, null, 0]);
    expect(aicDifference).toBe(family === "quasi-poisson" ? null : 0);
    expect(verdict).toBe("The two models differ by less than half a degree of freedom (0.00), too little to compare them this way: read the larger model's test of a curve against a line instead.");
  });
});

describe("Simultaneous quantiles are those of curves drawn by other means", () => {
  const draws = 8000;
  const drawn = Object.entries(everyKind).filter(([name]) => !["tensor product", "line"].includes(name));

  it.each(drawn)("of a %s, within 0.1 of 8,000 draws", (name, terms) => {
    const model = fitModel(modelOf("gaussian", withAuto(terms)), rows);
    const { id } = model.terms[model.terms.length - 1];
    const group = name === "smooth per level" ? "none" : name === "factor-smooth" ? "north" : undefined;
    const curve = termCurve(model, id, { points: 12, group });
    const covariance = pointCovariance(model, id, curve.x, group);
    const errors = curve.standardError;
    covariance.diagonal().forEach((value, k) => expect(Math.sqrt(Math.max(0, value))).toBeCloseTo(errors[k], 7));
    const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(covariance, { assumeSymmetric: true });
    const root = eigenvectorMatrix.mmul(Matrix.diag(realEigenvalues.map((value) => Math.sqrt(Math.max(0, value))))).to2DArray();
    const normal = seededNormal(5);
    const most = Float64Array.from({ length: draws }, () => {
      const normals = realEigenvalues.map(normal);
      return root.reduce((largest, own, k) => (errors[k] > 0 ? Math.max(largest, Math.abs(own.reduce((sum, value, j) => sum + value * normals[j], 0)) / errors[k]) : largest), 0);
    }).sort();
    expect(Math.abs(simultaneousQuantile(model, id, { points: 12, group, level: 0.9 }) - most[0.9 * draws - 1])).toBeLessThan(0.1);
  });

  /** Covariance of a curve's points, pair by pair from the coefficients'. */
  function pointCovariance(model: FittedModel, id: string, x: Float64Array | string[], group: string | undefined): Matrix {
    const column = model.terms.find((term) => term.id === id)?.columns ?? [];
    const at = Array.from<number | string>(x);
    const fill = (value: number | string) => at.map(() => value);
    const data = { ...Object.fromEntries(column.map((name) => [name, fill(group ?? 1)])), [column[0]]: at } as ModelData;
    const first = Object.fromEntries(Object.keys(rows).map((name) => [name, fill(rows[name as "y"][0])])) as ModelData;
    const own = extendModel(model, { ...first, ...data });
    const term = own.terms.find((one) => one.id === id);
    if (term === undefined) throw new Error(`no term ${id}`);
    const built = basisRows(term.basis, data);
    const gradients = at.map((_value, row) => {
      const vector = new Float64Array(own.coefficients.length);
      const entries = roomForRow(built);
      const count = gatherRow(built, row, term.first, entries);
      for (let k = 0; k < count; k++) vector[entries.indices[k]] += entries.values[k];
      return vector;
    });
    return new Matrix(gradients.map((left) => gradients.map((right) => covarianceQuadratic(own, left, right))));
  }
});

describe("Autocorrelation over gaps is what every pair of rows gives, asked one by one", () => {
  it.each([1, 2, 3, 4, 5, 6])("series of random lengths and gaps, seed %i", (seed) => {
    const uniform = seededUniform(seed);
    const normal = seededNormal(seed + 50);
    const list = Array.from({ length: 90 }, () => ({ series: `s${Math.floor(4 * uniform())}`, week: Math.floor(60 * uniform()), value: normal() }));
    const once = [...new Map(list.map((one) => [`${one.series} ${one.week}`, one])).values()].sort((left, right) => left.week - right.week);
    const found = autocorrelation(once.map(({ value }) => value), { lags: 70, series: once.map(({ series }) => series), time: once.map(({ week }) => week) });
    const means = Object.fromEntries(["s0", "s1", "s2", "s3"].map((name) => {
      const own = once.filter(({ series }) => series === name);
      return [name, own.reduce((sum, { value }) => sum + value, 0) / own.length];
    }));
    for (const { lag, pairs: count, estimate, upper } of found) {
      const both = once.flatMap((one) => once.filter((other) => other.series === one.series && other.week - one.week === lag).map((other) => [one.value - means[one.series], other.value - means[one.series]]));
      expect(count).toBe(both.length);
      const sum = (of: (pair: number[]) => number) => both.reduce((total, pair) => total + of(pair), 0);
      if (both.length === 0) expect([estimate, upper]).toEqual([null, null]);
      else {
        expect(estimate).toBeCloseTo(sum(([a, b]) => a * b) / Math.sqrt(sum(([a]) => a * a) * sum(([, b]) => b * b)), 10);
        expect(upper).toBeCloseTo(1.959963984540054 / Math.sqrt(both.length), 12);
      }
    }
  });
});

describe("The report's plain numbers", () => {
  it.each(families.flatMap((family) => Object.entries(everyKind).map(([name, terms]) => ({ family, name, terms }))))("are the model's own: $family, $name", ({ family, terms }) => {
    const model = fitModel(modelOf(family, withAuto(terms)), rows);
    const report = modelReport(model);
    expect(report.devianceExplained).toBeCloseTo(1 - model.deviance / model.nullDeviance, 12);
    expect([report.rowCount, report.edf, report.dispersion, report.criterion, report.converged]).toEqual([120, model.edf, model.dispersion, model.criterion, model.converged]);
    const { contributions } = predict(model, rows);
    report.terms.forEach(({ id, contributionRange: [from, to], edf, test, testReason }, at) => {
      expect(edf).toBe(model.terms[at].edf);
      expect(test === null).toBe(testReason !== null);
      if (test !== null) expect(test.pValue >= 0 && test.pValue <= 1).toBe(true);
      if (model.terms[at].basis.kind === "scaled-smooth" || (model.terms[at].basis.kind === "random-effect" && model.terms[at].columns.length > 1)) return;
      expect(Math.min(...contributions[id])).toBeCloseTo(from, 9);
      expect(Math.max(...contributions[id])).toBeCloseTo(to, 9);
    });
  });
});
