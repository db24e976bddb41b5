import { fitModel, normalQuantile, termCurve } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { simultaneousBand, simultaneousQuantile } from "@shared/engine/predict/simultaneous-band";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { exampleModel } from "./support/example-models";

const curves = exampleModel("curves and a factor");
const grouped = exampleModel("a curve per store");
const few = { draws: 4000 };

describe("The simultaneous quantile", () => {
  it("of a straight line is the pointwise one: all of it strays together", () => {
    const line = exampleModel("lines and a factor");
    for (const level of [0.8, 0.95]) expect(simultaneousQuantile(line, "price", { level })).toBe(normalQuantile(level));
    expect(simultaneousQuantile(curves, "promotion")).toBe(normalQuantile(0.95));
  });

  it("of independent levels is that of the largest of as many normals: (1 - level^(1/k)) / 2 in each tail (0.03, by 40,000 draws)", () => {
    // As many rows in each level, and no constant to share: a factor's k levels against a reference of very many rows.
    const area = Array.from({ length: 4000 }, (_, row) => (row < 120 ? `level ${row % 6}` : "all others"));
    const normal = seededNormal(5);
    const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "factor", column: "area", reference: "all others" }] }, { area, y: area.map(() => normal()) });
    expect(Math.abs(simultaneousQuantile(model, "area", { draws: 40_000 }) - normalQuantile(0.95 ** (1 / 6)))).toBeLessThan(0.03);
  });

  it("is larger for curves that bend more, and for a higher level", () => {
    const at = (smoothness: { df: number }) => simultaneousQuantile(exampleModel("curves and a factor", { terms: [{ kind: "smooth", column: "price", size: 20, smoothness }] }), "price", few);
    const [stiff, loose] = [at({ df: 2 }), at({ df: 12 })];
    expect(stiff).toBeGreaterThan(normalQuantile(0.95));
    expect(loose).toBeGreaterThan(stiff + 0.3);
    expect(simultaneousQuantile(curves, "price", { ...few, level: 0.99 })).toBeGreaterThan(simultaneousQuantile(curves, "price", few) + 0.3);
    // Bonferroni's bound for 100 points.
    expect(loose).toBeLessThan(normalQuantile(1 - 0.05 / 100));
  });

  it("is decided by the seed, and moves little with it", () => {
    const first = simultaneousQuantile(curves, "price", few);
    expect(simultaneousQuantile(curves, "price", few)).toBe(first);
    const other = simultaneousQuantile(curves, "price", { ...few, seed: 2 });
    expect(other).not.toBe(first);
    expect(Math.abs(other - first)).toBeLessThan(0.12);
  });

  it("at a single point is the pointwise one", () => {
    expect(simultaneousQuantile(curves, "price", { at: [1.5] })).toBe(normalQuantile(0.95));
  });

  it("is had for every kind that has a curve, groups' own by the groups' covariance", () => {
    for (const [model, id, group] of [
      [grouped, "price", undefined], [grouped, "price:store", "S2"], [exampleModel("a curve per level"), "price:area", "coast"],
      [exampleModel("a curve times a number"), "price:temperature", undefined], [exampleModel("a moving level"), "week", undefined],
      [exampleModel("two groupings"), "store", undefined], [exampleModel("a natural spline"), "price", undefined], [curves, "week", undefined],
    ] as const) {
      const quantile = simultaneousQuantile(model, id, { ...few, group });
      expect(quantile, id).toBeGreaterThan(2);
      expect(quantile, id).toBeLessThan(5);
    }
  });
});

describe("The simultaneous band", () => {
  it("is the curve with its limits set further apart, in standard errors by the quantile", () => {
    for (const [model, id, group] of [[curves, "price", undefined], [grouped, "price:store", "S2"]] as const) {
      const options = { ...few, group, points: 40, level: 0.9, seed: 3 };
      const band = simultaneousBand(model, id, options);
      const pointwise = termCurve(model, id, { group, points: 40, level: 0.9 });
      const quantile = simultaneousQuantile(model, id, options);
      expect(quantile).toBeGreaterThan(normalQuantile(0.9));
      expect(band.estimate).toEqual(pointwise.estimate);
      expect(band.supportCount).toEqual(pointwise.supportCount);
      band.x.forEach((_x, k) => {
        expect(band.upper[k]).toBeCloseTo(pointwise.estimate[k] + quantile * pointwise.standardError[k], 12);
        expect(band.lower[k]).toBeCloseTo(pointwise.estimate[k] - quantile * pointwise.standardError[k], 12);
      });
    }
  });

  it("holds a whole true curve about 95 times in 100 where the pointwise one fails: 200 fits, within four standard errors", () => {
    const normal = seededNormal(31);
    const x = Array.from({ length: 100 }, (_, row) => row / 99);
    const truth = (value: number) => Math.sin(5 * value);
    const spec: ModelSpec = { response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "x", size: 12 }] };
    const centre = x.reduce((sum, value) => sum + truth(value), 0) / x.length;
    let whole = 0;
    let pointwise = 0;
    for (let turn = 0; turn < 200; turn++) {
      const model = fitModel(spec, { x, y: x.map((value) => truth(value) + 0.4 * normal()) });
      const holds = (curve: ReturnType<typeof termCurve>) => x.every((value, k) => curve.lower[k] <= truth(value) - centre && truth(value) - centre <= curve.upper[k]);
      whole += holds(simultaneousBand(model, "x", { at: x, draws: 1000, seed: turn })) ? 1 : 0;
      pointwise += holds(termCurve(model, "x", { at: x })) ? 1 : 0;
    }
    expect(whole / 200).toBeGreaterThan(0.95 - 4 * Math.sqrt((0.05 * 0.95) / 200));
    expect(pointwise / 200).toBeLessThan(0.85);
  });
});

describe("Bad input", () => {
  const many = (): FittedModel => {
    const lot = Array.from({ length: 900 }, (_, row) => `lot ${row % 420}`);
    const normal = seededNormal(2);
    return fitModel({ response: "y", family: "gaussian", terms: [{ kind: "random-effect", column: "lot" }] }, { lot, y: lot.map(() => normal()) });
  };
  it.each<[string, () => unknown]>([
    ["draws is 20; it must be a whole number from 100 to 1000000.", () => simultaneousQuantile(curves, "price", { draws: 20 })],
    ["draws is 1000.5; it must be a whole number from 100 to 1000000.", () => simultaneousBand(curves, "price", { draws: 1000.5 })],
    ["seed is 0.5; it must be a whole number within 2147483648 of 0.", () => simultaneousQuantile(curves, "price", { seed: 0.5 })],
    ["level is 1; it must be above 0 and below 1.", () => simultaneousQuantile(curves, "price", { level: 1 })],
    ['The model has no term "depth"; it has "price", "week", "promotion".', () => simultaneousQuantile(curves, "depth")],
    ['Term "lot" has 420 coefficients at the values asked for; simultaneous bands are made of up to 400: ask for fewer by "at".', () => simultaneousBand(many(), "lot")],
  ])("%s", (message, attempt) => {
    expect(attempt).toThrow(message);
  });

  it("is no error where few of many groups are asked for", () => {
    expect(simultaneousQuantile(many(), "lot", { at: ["lot 1", "lot 2"], ...few })).toBeGreaterThan(2);
  });
});
