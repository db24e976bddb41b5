import { EngineError, compareModels, fitModel, modelReport, parseModel, predict, serialiseModel, termCurve } from "@shared/engine";
import type { ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { salesRows } from "../support/sales-rows";

const rows = salesRows(21, 90);
const local: TermSpec = { kind: "local-regression", column: "price", log: true, span: 0.5 };
const linear: TermSpec = { kind: "linear", column: "temperature" };
const factor: TermSpec = { kind: "factor", column: "promotion", reference: "none" };
const only = (...terms: TermSpec[]): ModelSpec => ({ response: "logUnits", family: "gaussian", terms });

describe("A local regression", () => {
  it("with weights is loess with weights, to 1e-9", () => {
    const x = [1, 1.3, 1.3, 2, 2.4, 2.9, 3.1, 3.8, 4, 4.5, 5.2, 5.9];
    const y = [2.1, 2.6, 2.3, 3.4, 3.1, 2.7, 2.9, 1.8, 2.2, 1.6, 1.9, 2.8];
    const w = [1, 2, 0.5, 3, 1, 1, 4, 0.25, 2, 1, 1.5, 2];
    // R 4.2.2: f <- loess(y ~ x, weights = w, span = 0.6, degree = 1, control = loess.control(surface = "direct",
    // statistics = "exact")); predict(f, data.frame(x = c(x, 2.2)), se = TRUE): fit, se.fit / f$s; f$trace.hat.
    const fitted = [
      2.2200840037, 2.5374103195, 2.5374103195, 3.1891634797, 3.0991901256, 2.9038022371, 2.7907173074, 2.2760483565, 2.1796102602,
      1.9822390308, 2.2851861121, 2.5778389686, 3.1512432915,
    ];
    const errors = [
      0.6508488553, 0.4726847156, 0.4726847156, 0.4229758546, 0.3310484622, 0.319273718, 0.3468292861, 0.4084344306, 0.3942777164,
      0.4408697278, 0.4136213695, 0.6211301705, 0.3717882674,
    ];
    const spec: ModelSpec = { response: "y", family: "gaussian", weights: "w", terms: [{ kind: "local-regression", column: "x", span: 0.6 }] };
    const model = fitModel(spec, { x, y, w });
    const prediction = predict(model, { x: [...x, 2.2] });
    expect(largestDifference(prediction.mean, fitted)).toBeLessThan(1e-9);
    expect(largestDifference(prediction.standardError.map((error) => error / Math.sqrt(model.dispersion)), errors)).toBeLessThan(1e-9);
    expect(model.edf).toBeCloseTo(4.2116840606, 9);
  });

  it.each([1, 2] as const)("of degree %i gives data that lie on a straight line back, within and beyond the range", (degree) => {
    const y = rows.temperature.map((value) => 3 - 0.25 * value);
    const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "temperature", span: 0.4, degree }] }, { ...rows, y });
    expect(largestDifference(model.fitted, y)).toBeLessThan(1e-11);
    const there = [-20, 3.3, 12, 60];
    expect(largestDifference(predict(model, { temperature: there }).mean, there.map((value) => 3 - 0.25 * value))).toBeLessThan(1e-9);
    expect(model.warnings.map(({ code }) => code)).toEqual(["perfect-fit"]);
  });

  it("does not mind the order of terms or rows, or the unit of the weights", () => {
    const spec = only(local, linear, factor);
    const model = fitModel(spec, rows);
    const turned = fitModel(only(factor, linear, local), rows);
    expect(largestDifference(turned.fitted, model.fitted)).toBeLessThan(1e-11);
    const reversed = Object.fromEntries(Object.entries(rows).map(([name, column]) => [name, [...column].reverse()])) as ModelData;
    expect(largestDifference([...fitModel(spec, reversed).fitted].reverse(), model.fitted)).toBeLessThan(1e-11);
    const seven = { ...rows, seven: rows.price.map(() => 7) };
    expect(largestDifference(fitModel({ ...spec, weights: "seven" }, seven).fitted, model.fitted)).toBeLessThan(1e-11);
    const otherwise = fitModel(only(local, linear, { ...factor, reference: "feature" }), rows);
    expect(largestDifference(otherwise.fitted, model.fitted)).toBeLessThan(1e-11);
  });

  it("leaves rows of weight zero out, and predicts them all the same", () => {
    const weights = rows.price.map((_, row) => (row % 9 === 4 ? 0 : 1));
    const kept = Object.fromEntries(Object.entries(rows).map(([name, column]) => [name, [...column].filter((_, row) => weights[row] > 0)])) as ModelData;
    const model = fitModel({ ...only(local, factor), weights: "w" }, { ...rows, w: weights });
    const alone = fitModel(only(local, factor), kept);
    expect(model.rowCount).toBe(80);
    expect(largestDifference(model.coefficients, alone.coefficients)).toBeLessThan(1e-12);
    expect(largestDifference(model.fitted, predict(alone, rows).mean)).toBeLessThan(1e-11);
  });

  it("is drawn as it contributes, with a band and a slope", () => {
    const model = fitModel(only(local, linear, factor), rows);
    const { contributions, linearPredictor } = predict(model, rows);
    const curve = termCurve(model, "price", { at: rows.price, derivative: true });
    expect(largestDifference(curve.estimate, contributions.price)).toBe(0);
    const sums = linearPredictor.map((_, row) => Object.values(contributions).reduce((sum, part) => sum + part[row], 0));
    expect(largestDifference(sums, linearPredictor)).toBeLessThan(1e-10);
    expect(largestDifference(linearPredictor, model.fitted)).toBeLessThan(1e-11);
    expect(Math.abs(contributions.price.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-10);
    expect(curve.standardError.every((error) => error > 0 && error < 1)).toBe(true);
    // The data's own elasticity is -2 at a price of 1 and -3.1 at 2.
    expect(curve.derivative?.estimate.every((slope) => slope > -5 && slope < -0.5)).toBe(true);
  });

  it("survives being written and read, bit by bit", () => {
    const model = fitModel(only(local, factor), rows);
    const read = parseModel(serialiseModel(model));
    expect(read).toEqual(model);
    expect(predict(read, rows)).toEqual(predict(model, rows));
  });

  it("is reported without tests or a criterion, and compared by F", () => {
    const smaller = fitModel(only(local), rows);
    const larger = fitModel(only(local, factor), rows);
    const report = modelReport(larger);
    expect(report.terms[0]).toMatchObject({ test: null, curveTest: null, concurvity: null });
    expect(report.aic).toBeNull();
    expect(larger.information).toBeNull();
    expect(larger.groupCovariance).toBeNull();
    const comparison = compareModels(smaller, larger);
    expect(comparison.degreesOfFreedom).toBeCloseTo(larger.edf - smaller.edf, 10);
    const gained = (smaller.deviance - larger.deviance) / comparison.degreesOfFreedom;
    expect(comparison.statistic).toBeCloseTo(gained / larger.dispersion, 9);
    expect(comparison.pValue).toBeLessThan(0.05);
  });
});

type Case = { rule: string; terms: TermSpec[]; data?: ModelData; message: string };
const two = (message: string): string =>
  `Terms ${message} cannot be told apart: a local regression of degree 1 draws straight lines itself. Leave one of them out, or give the local regression degree 0.`;
const many = Array.from({ length: 2001 }, (_, row) => row / 7);
const thousand = many.slice(0, 1100);

const refused: Case[] = [
  { rule: "a straight line in its column", terms: [local, { kind: "linear", column: "price", log: true, id: "line" }], message: two('"line" and "price"') },
  { rule: "a smooth of its column", terms: [{ kind: "smooth", column: "price", log: true, id: "curve" }, local], message: two('"curve" and "price"') },
  { rule: "another local line in its column", terms: [local, { ...local, id: "again", span: 0.7 } as TermSpec], message: two('"again" and "price"') },
  {
    rule: "a line in a column that is a multiple of its own", terms: [{ kind: "local-regression", column: "price", span: 0.5 }, { kind: "linear", column: "double" }],
    data: { ...rows, double: rows.price.map((value) => 2 * value) }, message: two('"double" and "price"'),
  },
  {
    rule: "a parabola beside a local parabola", terms: [{ kind: "local-regression", column: "price", span: 0.5, degree: 2 }, { kind: "linear", column: "squared" }],
    data: { ...rows, squared: rows.price.map((value) => value ** 2) },
    message: 'Terms "squared" and "price" cannot be told apart: a local regression of degree 2 draws straight lines and parabolas itself. Leave one of them out, or give the local regression degree 0.',
  },
  {
    rule: "a level per group", terms: [local, { kind: "random-effect", column: "promotion" }],
    message: 'Term "promotion" is on groups, which cannot stand beside the local regression "price"; use a smooth in place of "price".',
  },
  {
    rule: "a curve of given shape", terms: [{ kind: "smooth", column: "temperature", shape: "increasing" }, local],
    message: 'Term "temperature" has a shape, which cannot stand beside the local regression "price"; use a smooth in place of "price".',
  },
  {
    rule: "more than 2,000 rows", terms: [{ kind: "local-regression", column: "x", span: 0.5 }], data: { x: many, logUnits: many },
    message: 'Term "x": a local regression takes up to 2000 rows; the data has 2001. Use a smooth.',
  },
  {
    rule: "more than 2,000 distinct values in all", terms: [{ kind: "local-regression", column: "x", span: 0.5 }, { kind: "local-regression", column: "z", span: 0.5 }],
    data: { x: thousand, z: thousand.map((value) => value ** 2), logUnits: thousand },
    message: 'Local regressions "x", "z" have 2200 distinct values together; a model takes up to 2000. Round their columns, or use a smooth for one.',
  },
];

describe("A model with a local regression is refused with", () => {
  it.each(refused)("$rule", ({ terms, data, message }) => {
    const attempt = () => fitModel(only(...terms), data ?? rows);
    expect(attempt).toThrow(EngineError);
    expect(attempt).toThrow(message);
  });

  it("nothing where the local regression is a local mean, which has no lines of its own", () => {
    const model = fitModel(only({ ...local, degree: 0 } as TermSpec, { kind: "linear", column: "price", log: true, id: "line" }), rows);
    expect(model.converged).toBe(true);
    expect(model.terms[1].edf).toBe(1);
  });

  it("columns that others reproduce left out, and said", () => {
    const data = { ...rows, again: rows.temperature.map((value) => 3 * value) };
    const model = fitModel(only(local, linear, { kind: "linear", column: "again" }), data);
    const plain = fitModel(only(local, linear), data);
    expect(model.warnings.map(({ code, term }) => [code, term])).toEqual([["columns-indistinguishable", "again"]]);
    expect(model.terms.map(({ edf }) => edf)).toEqual([expect.closeTo(plain.terms[0].edf, 10), 1, 0]);
    expect(largestDifference(model.fitted, plain.fitted)).toBeLessThan(1e-11);
    expect(predict(model, data).standardError.every((error, row) => Math.abs(error - predict(plain, data).standardError[row]) < 1e-11)).toBe(true);
  });
});
