import { fitModel, predict, termCurve } from "@shared/engine";
import type { FittedModel, Shape, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";

const rows = everyKindRows(12);
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 9 };
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const shaped = (shape: Shape, change: Partial<TermSpec> = {}): TermSpec => ({ ...price, shape, ...change }) as TermSpec;

/** A curve that the data bend the other way is flat: beside an intercept of 2 rounding is left of it, which has no shape. */
const flat = 1e-11;

/** Most that a curve moves against its shape from one of 500 points to the next, as a share of its range; 0 of a flat one. */
function worstAgainst(model: FittedModel, id: string, of: { shape: Shape; group?: string }): number {
  const { estimate } = termCurve(model, id, { points: 500, ...(of.group === undefined ? {} : { group: of.group }) });
  const sign = of.shape === "decreasing" ? 1 : -1;
  const range = Math.max(...estimate) - Math.min(...estimate);
  let worst = 0;
  for (let k = 1; k < estimate.length; k++) worst = Math.max(worst, sign * (estimate[k] - estimate[k - 1]));
  return range < flat ? 0 : worst / range;
}

/** engine.md's rule: on 500 points no rise above 1e-12 of the curve's range. */
const allowed = 1e-12;
const shapes: Shape[] = ["decreasing", "increasing"];

describe.each(families)("A curve of a given shape, %s,", (family) => {
  it.each(shapes)("is monotone on 500 points, with the data and against them: %s", (shape) => {
    const model = fitModel(modelOf(family, [shaped(shape), promotion]), rows);
    expect(model.converged).toBe(true);
    expect(worstAgainst(model, "price", { shape })).toBeLessThan(allowed);
  });

  it.each(shapes)("is monotone per level: %s", (shape) => {
    const model = fitModel(modelOf(family, [promotion, shaped(shape, { by: "promotion" })]), rows);
    for (const group of ["none", "feature", "display"]) expect(worstAgainst(model, "price:promotion", { shape, group })).toBeLessThan(allowed);
  });

  it.each<[string, TermSpec]>([
    ["levels per group", { kind: "random-effect", column: "store" }],
    ["slopes per group", { kind: "random-effect", column: "store", by: "depth" }],
    ["curves per group", { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5 }],
  ])("is monotone beside %s", (_name, grouped) => {
    for (const shape of shapes) {
      const model = fitModel(modelOf(family, [shaped(shape), grouped]), rows);
      expect(worstAgainst(model, "price", { shape })).toBeLessThan(allowed);
    }
  });

  it("is monotone whatever its penalty", () => {
    for (const penalty of [1e-6, 0.01, 1, 1e4]) {
      for (const shape of shapes) {
        const model = fitModel(modelOf(family, [shaped(shape, { smoothness: { penalty } })]), rows);
        expect(worstAgainst(model, "price", { shape })).toBeLessThan(allowed);
      }
    }
  });

  it("is the unshaped curve where that is monotone already", () => {
    const stiff = { smoothness: { penalty: 500 } };
    const free = fitModel(modelOf(family, [{ ...price, ...stiff } as TermSpec, promotion]), rows);
    const held = fitModel(modelOf(family, [shaped("decreasing", stiff), promotion]), rows);
    expect(worstAgainst(free, "price", { shape: "decreasing" })).toBe(0);
    expect(largestDifference(held.coefficients, free.coefficients)).toBeLessThan(1e-12);
    expect(held.terms[0].edf).toBeCloseTo(free.terms[0].edf, 12);
  });

  it("spends no degrees of freedom where the data bend it the other way", () => {
    for (const penalty of [0.01, 1, 1e4]) {
      const model = fitModel(modelOf(family, [shaped("increasing", { smoothness: { penalty } })]), rows);
      expect(model.terms[0].edf).toBeGreaterThanOrEqual(0);
      expect(model.terms[0].edf).toBeLessThan(1e-6);
    }
  });

  it("whose straight line another term has already spends no less than nothing", () => {
    const line: TermSpec = { kind: "linear", column: "price", log: true, id: "line" };
    for (const shape of shapes) {
      const model = fitModel(modelOf(family, [line, shaped(shape, { smoothness: { penalty: 1 } })]), rows);
      expect(model.warnings.map(({ code }) => code)).toContain("columns-indistinguishable");
      expect(model.terms[1].edf).toBeGreaterThan(-1e-3);
      expect(model.edf).toBeLessThan(9);
    }
  });

  it("goes on beyond the range with its shape", () => {
    const model = fitModel(modelOf(family, [shaped("decreasing")]), rows);
    const { linearPredictor } = predict(model, { price: [0.01, 0.2, 0.9, 2.2, 5, 80] });
    for (let k = 1; k < 6; k++) expect(linearPredictor[k]).toBeLessThanOrEqual(linearPredictor[k - 1] + 1e-12);
  });
});

describe("A normal curve of a given shape", () => {
  const penalty = 0.02;
  const sizes = 6;
  const spec = (shape: Shape) => shaped(shape, { size: sizes, smoothness: { penalty } });
  const square = (values: ArrayLike<number>) => Array.from(values).reduce((sum, value) => sum + value * value, 0);

  /** Penalised sum of squares of a fit: residuals and squared second differences of the spline coefficients. */
  function penalised(coefficients: ArrayLike<number>, model: FittedModel): number {
    const [intercept, ...curve] = Array.from(coefficients);
    const fitted = predict({ ...model, coefficients: Float64Array.from([intercept, ...curve]) }, rows).linearPredictor;
    const bends = curve.slice(2).map((value, k) => value - 2 * curve[k + 1] + curve[k]);
    return square(fitted.map((value, row) => value - rows.y[row])) + penalty * square(bends);
  }

  it.each(shapes)("has the least penalised sum of squares among 2,000 curves of that shape around it: %s", (shape) => {
    const model = fitModel(modelOf("gaussian", [spec(shape)]), rows);
    const least = penalised(model.coefficients, model);
    const uniform = seededUniform(3);
    const sign = shape === "decreasing" ? -1 : 1;
    for (let trial = 0; trial < 2000; trial++) {
      const size = 10 ** (-4 * uniform());
      const curve = Array.from(model.coefficients.slice(1), (value) => value + size * (uniform() - 0.5));
      for (let k = 1; k < curve.length; k++) curve[k] = sign * Math.max(sign * curve[k], sign * curve[k - 1]);
      const other = penalised([model.coefficients[0] + size * (uniform() - 0.5), ...curve], model);
      expect(other).toBeGreaterThan(least * (1 - 1e-12));
    }
  });
});
