import { fitModel, predict } from "@shared/engine";
import type { Family, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** What each kind gives back unchanged, whatever its penalty; and what models without terms are. */
const rows = everyKindRows(91, 80);
const at = <Value>(of: (row: number) => Value): Value[] => rows.y.map((_, row) => of(row));
const stiff = { penalty: 1e4 } as const;

const reproduced: [string, TermSpec[], (row: number) => number][] = [
  ["a line is a line's", [{ kind: "linear", column: "price" }], (row) => 2 - 3 * rows.price[row]],
  ["a level for each value is a factor's", [{ kind: "factor", column: "promotion" }], (row) => rows.promotion[row].length],
  ["a line is a smooth's", [{ kind: "smooth", column: "price", size: 8, smoothness: stiff }], (row) => 2 - 3 * rows.price[row]],
  ["a line in the logarithm is that smooth's", [{ kind: "smooth", column: "price", log: true, size: 8, smoothness: stiff }], (row) => 1 - 2 * Math.log(rows.price[row])],
  ["a rising line is a rising smooth's", [{ kind: "smooth", column: "price", size: 8, shape: "increasing", smoothness: stiff }], (row) => 2 + 3 * rows.price[row]],
  ["a line for each level is a smooth's per level", [{ kind: "factor", column: "promotion" }, { kind: "smooth", column: "price", size: 6, by: "promotion", smoothness: stiff }], (row) => rows.promotion[row].length * (1 + rows.price[row])],
  ["a number times a line is a smooth's times that number", [{ kind: "smooth", column: "price", size: 6, by: "depth", smoothness: stiff }], (row) => 3 + rows.depth[row] * (4 - rows.price[row])],
  ["a constant is a circle's", [{ kind: "cyclic-smooth", column: "season", period: [0, 1], smoothness: stiff }], () => 2.5],
  ["a line is a natural spline's", [{ kind: "natural-spline", column: "price", df: 4 }], (row) => 2 - 3 * rows.price[row]],
  ["a constant is a local mean's", [{ kind: "local-regression", column: "price", span: 0.4, degree: 0 }], () => 2.5],
  ["a line is a local line's", [{ kind: "local-regression", column: "price", span: 0.4, degree: 1 }], (row) => 2 - 3 * rows.price[row]],
  ["a parabola is a local parabola's", [{ kind: "local-regression", column: "price", span: 0.4, degree: 2 }], (row) => 2 - 3 * rows.price[row] + rows.price[row] ** 2],
  ["a product of lines is a surface's beside its lines", [{ kind: "linear", column: "price" }, { kind: "linear", column: "depth" }, { kind: "tensor-product", columns: ["price", "depth"], smoothness: stiff }], (row) => (1 + rows.price[row]) * (2 - rows.depth[row])],
  ["a constant is a slowly moving level's", [{ kind: "random-walk", column: "week", smoothness: stiff }], () => 2.5],
  ["a constant is a model's with levels of groups", [{ kind: "random-effect", column: "store", smoothness: stiff }], () => 2.5],
  ["the chain's line is a model's with curves of groups", [{ kind: "smooth", column: "price", size: 6, smoothness: stiff }, { kind: "factor-smooth", column: "price", group: "store", size: 5, smoothness: stiff }], (row) => 2 - 3 * rows.price[row]],
];

/** Per family, the response that has this linear predictor exactly. */
const inverse: Record<Family, (predictor: number) => number> = {
  gaussian: (value) => value, "log-gaussian": Math.exp, "quasi-poisson": (value) => Math.exp(value / 2), "negative-binomial": (value) => Math.exp(value / 2),
  binomial: (value) => 1 / (1 + Math.exp(-value / 3)),
};
const share: Record<Family, number> = { gaussian: 1, "log-gaussian": 1, "quasi-poisson": 0.5, "negative-binomial": 0.5, binomial: 1 / 3 };

describe.each(families)("Given back unchanged, %s:", (family) => {
  it.each(reproduced)("%s", (_name, terms, of) => {
    const data = { ...rows, exact: at((row) => inverse[family](of(row))) };
    const model = fitModel({ response: "exact", family, terms }, data);
    expect(largestDifference(predict(model, data).linearPredictor, at((row) => share[family] * of(row)))).toBeLessThan(1e-5);
    expect([...model.covariance, model.criterion, model.dispersion].every(Number.isFinite)).toBe(true);
  });
});

describe.each(families)("A %s model without terms", (family) => {
  const spec: ModelSpec = modelOf(family, [], { weights: "weight", offset: "depth" });
  const data = { ...rows, weight: at((row) => 1 + (row % 3)) };
  const bare = fitModel(spec, data);
  const response = data[spec.response as "y"];

  it("has its own deviance for the null deviance, and leaves nothing explained", () => {
    expect(bare.deviance / bare.nullDeviance).toBeCloseTo(1, 8);
    expect(bare.edf).toBe(1);
    expect(bare.converged).toBe(true);
    expect(bare.coefficientNames).toEqual(["intercept"]);
  });

  it("meets the response on the whole, as maximum likelihood does: weighted residuals over the variance sum to nothing", () => {
    const { fitted, theta } = bare;
    const own = family === "log-gaussian" ? response.map(Math.log) : response;
    const mean = family === "log-gaussian" ? predict(bare, data).linearPredictor : fitted;
    const scores = own.map((value, row) => (data.weight[row] * (value - mean[row])) / (theta === null ? 1 : 1 + mean[row] / theta));
    expect(Math.abs(scores.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-5 * own.reduce((sum, value) => sum + Math.abs(value), 0));
  });

  it("is the null model of every larger one of known variance", () => {
    if (family === "negative-binomial") return expect(bare.theta).toBeGreaterThan(0);
    for (const terms of [everyKind.smooth, everyKind.factor, everyKind["random effect"]]) {
      const larger = fitModel({ ...spec, terms }, data);
      expect(larger.nullDeviance / bare.deviance).toBeCloseTo(1, 8);
      expect(larger.deviance).toBeLessThan(bare.deviance);
    }
  });
});
