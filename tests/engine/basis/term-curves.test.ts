import { describe, expect, it } from "vitest";
import { fitModel, predict, supportCounts, termCurve, termSurface } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";
import { driverRows } from "./term-values";

const count = 160;
const drivers = driverRows(12, count);
const noise = seededNormal(13);
const level: Record<string, number> = { s0: 0.6, s1: -0.3, s2: 0, s3: -0.4 };
const units = drivers.price.map((price, row) =>
  3 - Math.log(price) * (1.5 + level[drivers.store[row]]) + level[drivers.store[row]] + 0.03 * (price - 2) * drivers.temperature[row] + 0.2 * noise());
const data = { ...drivers, units } satisfies ModelData;
const fit = (...terms: TermSpec[]): FittedModel => fitModel({ response: "units", family: "gaussian", terms }, data);
const price: TermSpec = { kind: "smooth", column: "price", size: 8 };
const refused = (code: string, message: string) => expect.objectContaining({ name: "EngineError", code, message });

describe("A term's curve", () => {
  it("of a smooth times numbers is per unit of the number: contributions over the number", () => {
    const model = fit({ kind: "smooth", column: "price", by: "temperature" });
    const { contributions } = predict(model, { price: [1.3, 2.4], temperature: [10, -4] });
    const { estimate, observedRange } = termCurve(model, "price:temperature", { at: [1.3, 2.4] });
    expect(largestDifference([10 * estimate[0], -4 * estimate[1]], contributions["price:temperature"])).toBeLessThan(1e-12);
    expect(observedRange).toEqual([Math.min(...data.price), Math.max(...data.price)]);
  });

  it("of curves per level is the level's own, with the rows of that level alone", () => {
    const model = fit({ kind: "factor", column: "store" }, { kind: "smooth", column: "price", by: "store", size: 6 });
    const curve = termCurve(model, "price:store", { group: "s1", points: 5 });
    const { contributions } = predict(model, { price: Array.from(curve.x as Float64Array), store: new Array<string>(5).fill("s1") });
    expect(largestDifference(curve.estimate, contributions["price:store"])).toBeLessThan(1e-12);
    const half = 0.05 * (Math.max(...data.price) - Math.min(...data.price));
    const near = Array.from(curve.x as Float64Array, (x) => data.price.filter((value, row) => data.store[row] === "s1" && Math.abs(value - x) <= half + 1e-12).length);
    expect([...curve.supportCount]).toEqual(near);
    expect(curve.supportCount.every((own, k) => own <= supportCounts(model.terms[1], curve.x)[k])).toBe(true);
  });

  it("of a group is its deviation alone, with a derivative that differences come to", () => {
    const model = fit(price, { kind: "factor-smooth", column: "price", group: "store" });
    const at = [1.4, 1.4 * Math.exp(1e-5), 1.4 * Math.exp(-1e-5)];
    const { estimate, derivative } = termCurve(model, "price:store", { group: "s0", at, derivative: true });
    const { contributions } = predict(model, { price: at, store: ["s0", "s0", "s0"] });
    expect(largestDifference(estimate, contributions["price:store"])).toBeLessThan(1e-12);
    expect(derivative!.estimate[0]).toBeCloseTo((estimate[1] - estimate[2]) / 2e-5, 6);
  });

  it("of a random effect is over its groups, a group never seen at zero with a wider band", () => {
    const model = fit(price, { kind: "random-effect", column: "store" });
    const all = termCurve(model, "store");
    expect(all.x).toEqual(["s0", "s1", "s2", "s3"]);
    expect([...all.supportCount]).toEqual([40, 40, 40, 40]);
    expect(all.estimate[0]).toBeGreaterThan(all.estimate[3]);
    const { estimate, standardError, outside, supportCount } = termCurve(model, "store", { at: ["new", "s0"] });
    expect(estimate[0]).toBe(0);
    expect(standardError[0]).toBeGreaterThan(standardError[1]);
    expect([...outside]).toEqual([1, 0]);
    expect(supportCount[0]).toBe(0);
  });

  it("of a slope per group is per unit of the number", () => {
    const model = fit(price, { kind: "random-effect", column: "store", by: "temperature" });
    const { contributions } = predict(model, { price: [2, 2], store: ["s0", "s3"], temperature: [10, -5] });
    const { estimate } = termCurve(model, "store:temperature", { at: ["s0", "s3"] });
    expect(largestDifference([10 * estimate[0], -5 * estimate[1]], contributions["store:temperature"])).toBeLessThan(1e-12);
  });

  it("of a random walk is over every week, flat after the last with a growing band", () => {
    const model = fit(price, { kind: "random-walk", column: "week", smoothness: { penalty: 5 } });
    const [first, last] = [Math.min(...data.week), Math.max(...data.week)];
    const all = termCurve(model, "week", { points: 7 });
    expect([...(all.x as Float64Array)]).toEqual(Array.from({ length: last - first + 1 }, (_, k) => first + k));
    const ahead = termCurve(model, "week", { at: [last, last + 1, last + 8] });
    expect(ahead.estimate[1]).toBe(ahead.estimate[0]);
    expect(ahead.estimate[2]).toBe(ahead.estimate[0]);
    expect(ahead.standardError[1]).toBeGreaterThan(ahead.standardError[0]);
    expect(ahead.standardError[2]).toBeGreaterThan(ahead.standardError[1]);
    expect([...ahead.outside]).toEqual([0, 1, 1]);
    // Each week ahead adds dispersion / penalty to the variance.
    const step = model.dispersion / model.terms[1].penalties[0];
    expect(ahead.standardError[2] ** 2 - ahead.standardError[1] ** 2).toBeCloseTo(7 * step, 12);
  });

  it("of a natural spline is centred over the rows, and a straight line beyond them", () => {
    const model = fit({ kind: "natural-spline", column: "price", df: 4 });
    const centred = termCurve(model, "price", { at: data.price }).estimate.reduce((sum, value) => sum + value, 0);
    expect(Math.abs(centred)).toBeLessThan(1e-9);
    const [a, b, c] = termCurve(model, "price", { at: [4, 5, 6] }).estimate;
    expect(a - 2 * b + c).toBeCloseTo(0, 9);
  });
});

describe("A term's curve is refused, by name and rule,", () => {
  const levelled = fit({ kind: "factor", column: "promotion" }, { kind: "smooth", column: "price", by: "promotion" });

  it("where several curves are none named", () => {
    expect(() => termCurve(levelled, "price:promotion")).toThrow(
      refused("option-invalid", 'Term "price:promotion" has several curves; name one by group: "feature", "none".'),
    );
  });

  it("for a level that has none", () => {
    expect(() => termCurve(levelled, "price:promotion", { group: "coupon" })).toThrow(
      refused("level-unknown", 'Term "price:promotion" has no curve for "coupon"; it has "feature", "none".'),
    );
  });

  it("where a group is named for a single curve", () => {
    expect(() => termCurve(fit(price), "price", { group: "s1" })).toThrow(
      refused("option-invalid", 'group is "s1"; term "price" has one curve only.'),
    );
  });

  it("for a surface", () => {
    const model = fit(price, { kind: "tensor-product", columns: ["price", "temperature"] });
    expect(() => termCurve(model, "price:temperature")).toThrow(
      refused("option-invalid", 'Term "price:temperature" is a surface over two columns, not a curve; ask for its surface.'),
    );
  });

  it("at half a week", () => {
    const model = fit({ kind: "random-walk", column: "week" });
    expect(() => termCurve(model, "week", { at: [20.5] })).toThrow(
      refused("column-kind", 'Column "week" (random-walk) must hold whole numbers of weeks; row 1 is 20.5.'),
    );
  });
});

describe("A tensor product's surface", () => {
  const temperature: TermSpec = { kind: "smooth", column: "temperature" };
  const model = fit(price, temperature, { kind: "tensor-product", columns: ["price", "temperature"] });
  const surface = termSurface(model, "price:temperature", { points: 7, level: 0.8 });
  const range = (values: number[]) => [Math.min(...values), Math.max(...values)];

  it("is what predictions contribute on a grid over both ranges, row by row", () => {
    expect([surface.x[0], surface.x[6]]).toEqual(range(data.price));
    expect([surface.y[0], surface.y[6]]).toEqual(range(data.temperature));
    const grid = Array.from({ length: 49 }, (_, k) => ({ price: surface.x[Math.floor(k / 7)], temperature: surface.y[k % 7] }));
    const { contributions } = predict(model, { price: grid.map((cell) => cell.price), temperature: grid.map((cell) => cell.temperature) });
    expect(largestDifference(surface.estimate, contributions["price:temperature"])).toBeLessThan(1e-12);
    // 1.2815515655446004: standard normal quantile of 0.9 (R 4.2.2, qnorm).
    const half = surface.standardError.map((error) => 1.2815515655446004 * error);
    expect(largestDifference(surface.upper.map((value, k) => value - surface.estimate[k]), half)).toBeLessThan(1e-12);
  });

  it("counts the rows near each point in both directions", () => {
    const reach = (values: number[]) => 0.05 * (Math.max(...values) - Math.min(...values)) + 1e-9;
    const expected = Array.from({ length: 49 }, (_, k) => data.price.filter((value, row) =>
      Math.abs(value - surface.x[Math.floor(k / 7)]) <= reach(data.price) && Math.abs(data.temperature[row] - surface.y[k % 7]) <= reach(data.temperature)).length);
    expect([...surface.supportCount]).toEqual(expected);
    expect(Math.max(...expected)).toBeGreaterThan(2);
  });

  it("is refused for a curve, an unknown term and too many points", () => {
    expect(() => termSurface(model, "price")).toThrow(refused("option-invalid", 'Term "price" is a smooth, not a surface over two columns; ask for its curve.'));
    expect(() => termSurface(model, "depth")).toThrow(refused("term-unknown", 'The model has no term "depth"; it has "price", "temperature", "price:temperature".'));
    expect(() => termSurface(model, "price:temperature", { points: 301 })).toThrow(refused("option-invalid", "points is 301; it must be a whole number from 2 to 300."));
  });
});
