import { covarianceQuadratic, designRows, designTransposeTimes, designTransposeTimesMany, extendModel, fitModel, predict, supportCounts, termSurface, transposeTimes } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, inOrder, modelOf } from "../support/every-kind-rows";
import { seededNormal, seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";
import { denseRows } from "./dense-covariance";

/** Counts of rows, and sums over rows, against loops over all of them. */
const rows = everyKindRows(53, 90);
const kinds = Object.entries(everyKind);
const termOf = (terms: readonly TermSpec[]) => {
  const model = fitModel(modelOf("gaussian", terms), rows);
  return model.terms[model.terms.length - 1];
};
const uniform = seededUniform(3);

describe("Support is a count of all rows near a value, one by one", () => {
  const near: [string, readonly number[], (value: number) => number][] = [
    ["line", rows.temperature, (value) => value], ["smooth", rows.price, Math.log], ["smooth times a number", rows.price, Math.log],
    ["natural spline", rows.price, (value) => value], ["local regression", rows.temperature, (value) => value], ["random walk", rows.week, (value) => value],
  ];

  it.each(near)("within a twentieth of the range on the scale of the basis: %s", (name, column, scale) => {
    const term = termOf(everyKind[name]);
    const scaled = column.map(scale);
    const half = (Math.max(...scaled) - Math.min(...scaled)) / 20;
    const [from, to] = [Math.min(...column), Math.max(...column)];
    const at = Float64Array.from({ length: 60 }, (_, k) => (name === "random walk" ? Math.round(from - 4 + (k * (to - from + 8)) / 59) : from * 0.9 + ((to * 1.1 - from * 0.9) * k) / 59));
    const expected = Array.from(at, (value) => scaled.filter((own) => Math.abs(own - scale(value)) <= half + 1e-9).length);
    expect([...supportCounts(term, at)]).toEqual(expected);
  });

  it("around the circle, over its seam", () => {
    const term = termOf(everyKind.circle);
    const at = Float64Array.from({ length: 50 }, (_, k) => -1 + k / 20);
    const apart = (left: number, right: number) => Math.abs(left - right - Math.round(left - right));
    expect([...supportCounts(term, at)]).toEqual(Array.from(at, (value) => rows.season.filter((own) => apart(own, value) <= 0.05 + 1e-12).length));
  });

  it.each([["smooth per level", "promotion", "feature"], ["factor-smooth", "store", "east"]] as const)("of one level's or group's rows alone: %s", (name, column, group) => {
    const term = termOf(everyKind[name]);
    const logs = rows.price.map(Math.log);
    const half = (Math.max(...logs) - Math.min(...logs)) / 20;
    const at = Float64Array.from({ length: 20 }, () => 1 + uniform());
    const own = (value: number) => logs.filter((log, row) => rows[column][row] === group && Math.abs(log - Math.log(value)) <= half + 1e-12).length;
    expect([...supportCounts(term, at, group)]).toEqual(Array.from(at, own));
    expect(supportCounts(term, at).reduce((sum, value) => sum + value, 0)).toBeGreaterThan(supportCounts(term, at, group).reduce((sum, value) => sum + value, 0));
  });

  it("of levels and groups by name, none of one never seen", () => {
    for (const [name, column] of [["factor", "promotion"], ["random effect", "store"], ["random slope", "store"]] as const) {
      const names = [...new Set(rows[column]), "never"];
      expect([...supportCounts(termOf(everyKind[name]), names)]).toEqual(names.map((level) => rows[column].filter((own) => own === level).length));
    }
  });

  it("of a surface in both directions at once", () => {
    const model = fitModel(modelOf("gaussian", everyKind["tensor product"]), rows);
    const { x, y, supportCount } = termSurface(model, "price:temperature", { points: 12 });
    const [width, height] = [rows.price, rows.temperature].map((column) => (Math.max(...column) - Math.min(...column)) / 20);
    const expected = Array.from(supportCount, (_count, at) => rows.price.filter((price, row) =>
      Math.abs(price - x[Math.floor(at / 12)]) <= width + 1e-9 && Math.abs(rows.temperature[row] - y[at % 12]) <= height + 1e-9).length);
    expect([...supportCount]).toEqual(expected);
  });
});

describe.each(kinds)("Sums over the rows of a model with a %s", (_name, terms) => {
  const model = fitModel(modelOf("gaussian", terms), rows);
  const normal = seededNormal(8);
  const vectors = [0, 1].map(() => Float64Array.from(rows.y, normal));
  /** X'v by the dense rows. */
  const plain = (of: FittedModel, data: ModelData, vector: Float64Array) => {
    const dense = denseRows(designRows(of, data), of.coefficients.length);
    return Float64Array.from(of.coefficients, (_value, k) => dense.reduce((sum, row, at) => sum + row[k] * vector[at], 0));
  };

  it("are X'v, row by row, for one vector and for many", () => {
    const many = designTransposeTimesMany(model, rows, vectors);
    vectors.forEach((vector, k) => {
      expect(largestDifference(many[k], plain(model, rows, vector))).toBeLessThan(1e-9);
      expect(designTransposeTimes(model, rows, vector)).toEqual(many[k]);
      expect(transposeTimes(model, designRows(model, rows), vector)).toEqual(many[k]);
    });
    expect(designTransposeTimesMany(model, rows, [])).toEqual([]);
  });

  it("times the coefficients are the sum of what the rows predict, their variance by every pair of coefficients", () => {
    const gradient = designTransposeTimes(model, rows, vectors[0]);
    const { linearPredictor } = predict(model, rows);
    const sum = (values: ArrayLike<number>) => Array.from(values).reduce((total, value, k) => total + value * vectors[0][k], 0);
    expect(gradient.reduce((total, value, k) => total + value * model.coefficients[k], 0)).toBeCloseTo(sum(linearPredictor), 8);
    expect(covarianceQuadratic(model, gradient, gradient)).toBeGreaterThan(0);
    const [left, right] = designTransposeTimesMany(model, rows, vectors);
    const both = left.map((value, k) => value + right[k]);
    // The parallelogram's: cov(a, b) = (var(a + b) - var(a) - var(b)) / 2.
    const of = (vector: Float64Array) => covarianceQuadratic(model, vector, vector);
    expect(covarianceQuadratic(model, left, right)).toBeCloseTo((of(both) - of(left) - of(right)) / 2, 6);
    expect(covarianceQuadratic(model, right, left)).toBeCloseTo(covarianceQuadratic(model, left, right), 9);
  });

  it("of new weeks and groups are those of the model carried on", () => {
    const data: ModelData = { ...inOrder(rows, [0, 1, 2]), week: [5, 60, 61], store: ["north", "new", "new"] };
    const extended = extendModel(model, data);
    const vector = Float64Array.of(1, -2, 0.5);
    expect(largestDifference(designTransposeTimes(extended, data, vector), plain(extended, data, vector))).toBeLessThan(1e-10);
    const errors = predict(model, data).standardError;
    designTransposeTimesMany(extended, data, [Float64Array.of(1, 0, 0), Float64Array.of(0, 1, 0), Float64Array.of(0, 0, 1)]).forEach((gradient, row) => {
      expect(Math.sqrt(covarianceQuadratic(extended, gradient, gradient))).toBeCloseTo(errors[row], 9);
    });
  });
});
