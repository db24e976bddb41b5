import { bandModel, covarianceQuadratic, curveDifference, designTransposeTimes, EngineError, termCurve } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { exampleModel } from "../inference/support/example-models";

const row = { price: [1.5], temperature: [12], week: [1], promotion: ["none"], area: ["coast"], store: ["S1"] };

describe("A curve relative to one of its values", () => {
  it.each([
    ["curves and a factor", "price", [1.1, 1.4, 1.9, 2.6], 1.4], ["curves and a factor", "week", [1, 5.5, 15], 3],
    ["lines and a factor", "temperature", [-2, 12, 25], 10], ["a natural spline", "price", [1.1, 1.9], 1.5], ["a moving level", "week", [1, 4, 9], 2],
  ] as const)("has the error of the difference of two rows (1e-9): %s, %s", (name, id, at, from) => {
    const model = bandModel(exampleModel(name), "averaged");
    const term = model.terms.find((one) => one.id === id)!;
    const rowAt = (value: number) => designTransposeTimes(model, { ...row, [term.columns[0]]: [value] }, Float64Array.of(1));
    const { x, estimate, standardError, lower, upper } = curveDifference(model, id, { at: [...at], from, level: 0.8 });
    expect([...x]).toEqual([...at]);
    at.forEach((value, k) => {
      const gradient = rowAt(value).map((entry, index) => entry - rowAt(from)[index]);
      const error = Math.sqrt(Math.max(0, covarianceQuadratic(model, gradient, gradient)));
      expect(Math.abs(standardError[k] - error)).toBeLessThanOrEqual(1e-9 * (1 + error));
      expect(estimate[k]).toBeCloseTo(gradient.reduce((sum, entry, index) => sum + entry * model.coefficients[index], 0), 10);
      // R: qnorm(0.9)
      expect(upper[k] - lower[k]).toBeCloseTo(2 * 1.2815515655446004 * standardError[k], 10);
    });
  });

  it("is zero without doubt there, and the difference of the two contributions elsewhere, at 95 % unless told otherwise", () => {
    const model = exampleModel("curves and a factor");
    const { estimate, standardError, lower, upper } = curveDifference(model, "price", { at: [1.2, 1.7], from: 1.7 });
    const own = termCurve(model, "price", { at: [1.2, 1.7] });
    expect([estimate[1], standardError[1], lower[1], upper[1]]).toEqual([0, 0, 0, 0]);
    expect(estimate[0]).toBeCloseTo(own.estimate[0] - own.estimate[1], 12);
    // R: qnorm(0.975)
    expect(upper[0] - estimate[0]).toBeCloseTo(1.959963984540054 * standardError[0], 10);
  });

  it("of levels is relative to any of them, and of a curve per level to a value of its own", () => {
    const factor = curveDifference(exampleModel("curves and a factor"), "promotion", { at: ["none", "feature"], from: "feature" });
    expect([factor.estimate[1], factor.standardError[1]]).toEqual([0, 0]);
    expect(factor.x).toEqual(["none", "feature"]);
    const one = exampleModel("a curve per level");
    const own = termCurve(one, "price:area", { at: [1.2, 1.8], group: "coast" });
    const { estimate } = curveDifference(one, "price:area", { at: [1.2], from: 1.8, group: "coast" });
    expect(estimate[0]).toBeCloseTo(own.estimate[0] - own.estimate[1], 12);
  });

  it("has the band asked for, else the model's own", () => {
    const model = exampleModel("curves and a factor");
    const of = (given: typeof model, band?: "averaged" | "pointwise") => curveDifference(given, "price", { at: [1.2], from: 1.8, band }).standardError[0];
    expect(of(bandModel(model, "averaged"))).toBe(of(model, "averaged"));
    expect(of(model)).toBe(of(model, "pointwise"));
    expect(of(model, "averaged")).toBeGreaterThan(1.01 * of(model));
  });

  it("refuses what the curve itself refuses", () => {
    const model = exampleModel("curves and a factor");
    expect(() => curveDifference(model, "rain", { at: [1], from: 1 })).toThrow(EngineError);
    expect(() => curveDifference(model, "price", { at: [1], from: "cheap" })).toThrow('at holds "cheap"; term "price" needs numbers.');
    expect(() => curveDifference(model, "promotion", { at: ["none"], from: "gift" })).toThrow(/gift/);
    expect(() => curveDifference(model, "price", { at: [1], from: 1, level: 2 })).toThrow(/level/);
  });
});
