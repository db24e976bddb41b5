import { fitModel, normalQuantile, predict, termCurve, termSurface } from "@shared/engine";
import type { FittedModel, ModelData, TermCurveOptions } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf, withAuto } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** Curves against predictions of rows that differ in nothing but the curve's own column. */
const rows = everyKindRows(47, 100);
const curved = Object.entries(everyKind).filter(([name]) => name !== "tensor product");
const groupOf: Record<string, string> = { "smooth per level": "feature", "factor-smooth": "south" };
const isPerUnit = (name: string) => name === "smooth times a number" || name === "random slope";

/** A curve's points as rows: its own column, the group named, one unit of what multiplies it. */
function rowsAt(model: FittedModel, id: string, { x, group }: { x: Float64Array | string[]; group?: string }): ModelData {
  const at = Array.from<number | string>(x);
  const fill = (value: number | string) => at.map(() => value);
  const common = Object.fromEntries(Object.entries(rows).map(([name, column]) => [name, fill(column[0])]));
  const [column, second] = model.terms.find((term) => term.id === id)?.columns ?? [];
  return { ...common, ...(second === undefined ? {} : { [second]: fill(group ?? 1) }), [column]: at } as ModelData;
}

describe.each(families)("A curve of a %s model", (family) => {
  it.each(curved)("is what its term contributes to rows along it, with the band of any level: %s", (name, terms) => {
    const model = fitModel(modelOf(family, withAuto(terms)), rows);
    const { id } = model.terms[model.terms.length - 1];
    const options: TermCurveOptions = { points: 9, group: groupOf[name] };
    const curve = termCurve(model, id, options);
    const { contributions } = predict(model, rowsAt(model, id, { x: curve.x, group: groupOf[name] }));
    expect(largestDifference(curve.estimate, contributions[id])).toBeLessThan(1e-10);
    for (const level of [0.5, 0.8, 0.99]) {
      const { lower, upper, standardError, estimate } = termCurve(model, id, { ...options, level });
      expect(standardError).toEqual(curve.standardError);
      estimate.forEach((value, k) => {
        expect(upper[k] - value).toBeCloseTo(normalQuantile(level) * standardError[k], 12);
        expect(value - lower[k]).toBeCloseTo(normalQuantile(level) * standardError[k], 12);
      });
    }
  });

  it.each(curved.filter(([name]) => !["factor", "random effect", "random slope", "random walk"].includes(name)))("has the slope by ln x that differences of it come to: %s", (name, terms) => {
    const model = fitModel(modelOf(family, withAuto(terms)), rows);
    const { id, observedRange } = model.terms[model.terms.length - 1];
    const [from, to] = observedRange ?? [0, 0];
    const step = 1e-5;
    const at = [0.13, 0.41, 0.77].map((share) => from + share * (to - from));
    const around = at.flatMap((x) => [x * Math.exp(-step), x * Math.exp(step)]);
    const { derivative } = termCurve(model, id, { at, group: groupOf[name], derivative: true });
    const { estimate } = termCurve(model, id, { at: around, group: groupOf[name] });
    // A local regression's slope is its polynomial's, not the curve's own.
    const tolerance = name === "local regression" ? 1 : 1e-4;
    at.forEach((_x, k) => expect(Math.abs((derivative?.estimate[k] ?? Number.NaN) - (estimate[2 * k + 1] - estimate[2 * k]) / (2 * step))).toBeLessThan(tolerance));
    expect(derivative?.standardError.every((error) => error > 0 || name === "line")).toBe(true);
  });
});

describe("Where a curve is drawn", () => {
  const model = fitModel(modelOf("gaussian", [...everyKind.smooth, ...everyKind.circle, ...everyKind.factor, ...everyKind["random walk"], ...everyKind["tensor product"]]), rows);
  const [least, most] = [Math.min(...rows.price), Math.max(...rows.price)];

  it("is evenly over the range of the scale it was fitted on, 100 points unless told", () => {
    const { x, observedRange } = termCurve(model, "price");
    expect([x.length, observedRange]).toEqual([100, [least, most]]);
    const logs = Array.from(x as Float64Array, Math.log);
    for (let k = 1; k < 100; k++) expect(logs[k] - logs[k - 1]).toBeCloseTo((Math.log(most) - Math.log(least)) / 99, 12);
    expect([x[0], x[99]].map(Number)).toEqual([expect.closeTo(least, 12), expect.closeTo(most, 12)]);
  });

  it("is the whole circle, closed, whatever was seen of it", () => {
    const { x, estimate } = termCurve(model, "season", { points: 25 });
    expect([x[0], x[24]]).toEqual([0, 1]);
    expect(estimate[0]).toBeCloseTo(estimate[24], 12);
  });

  it("is a factor's levels with its reference at zero, known for certain, and every week of a slowly moving level", () => {
    const { x, estimate, standardError, supportCount } = termCurve(model, "promotion");
    expect(x).toEqual(["display", "feature", "none"]);
    expect([estimate[0], standardError[0]]).toEqual([0, 0]);
    expect([...supportCount]).toEqual(["display", "feature", "none"].map((level) => rows.promotion.filter((own) => own === level).length));
    expect(termCurve(model, "week").x).toHaveLength(40);
  });

  it("is where it is asked for, in that order, twice if asked twice", () => {
    const { x, estimate } = termCurve(model, "price", { at: [1.6, 1.2, 1.6] });
    expect([...x]).toEqual([1.6, 1.2, 1.6]);
    expect(estimate[0]).toBe(estimate[2]);
    expect(termCurve(model, "price", { at: [] }).estimate).toHaveLength(0);
    expect(termCurve(model, "promotion", { at: ["none"] }).estimate).toHaveLength(1);
  });

  const refused: [string, string, TermCurveOptions, string][] = [
    ["of one point", "price", { points: 1 }, "points is 1; it must be a whole number from 2 to 100000."],
    ["of half a point more", "price", { points: 2.5 }, "points is 2.5; it must be a whole number from 2 to 100000."],
    ["at a price of nothing", "price", { at: [0] }, 'Column "price" (smooth, log) must be above 0 to have a logarithm; row 1 is 0.'],
    ["at no number", "season", { at: [Number.NaN] }, 'Column "season" (cyclic-smooth) must be finite; row 1 is NaN.'],
    ["at a word", "price", { at: ["cheap"] }, 'at holds "cheap"; term "price" needs numbers.'],
    ["at a level never seen", "promotion", { at: ["coupon"] }, 'Level "coupon" of factor "promotion" (row 1) was never seen in the fit; seen were "display", "feature", "none".'],
    ["of a certain band", "price", { level: 1 }, "level is 1; it must be above 0 and below 1."],
    ["of a surface", "price:temperature", {}, 'Term "price:temperature" is a surface over two columns, not a curve; ask for its surface.'],
    ["of a term that is none", "depth", {}, 'The model has no term "depth"; it has "price", "season", "promotion", "week", "price:temperature".'],
  ];

  it.each(refused)("is refused %s", (_name, id, options, message) => {
    expect(() => termCurve(model, id, options)).toThrow(expect.objectContaining({ name: "EngineError", message }) as Error);
  });

  it("is for a surface a grid over both ranges, which predictions along it agree with", () => {
    const { x, y, estimate, standardError, upper, lower } = termSurface(model, "price:temperature", { points: 4, level: 0.8 });
    expect([x.length, y.length, estimate.length]).toEqual([4, 4, 16]);
    const data = { ...rowsAt(model, "price", { x: Float64Array.from(estimate) }), price: Array.from(estimate, (_, k) => x[Math.floor(k / 4)]), temperature: Array.from(estimate, (_, k) => y[k % 4]) };
    expect(largestDifference(predict(model, data as ModelData).contributions["price:temperature"], estimate)).toBeLessThan(1e-12);
    estimate.forEach((value, k) => {
      expect(upper[k] - value).toBeCloseTo(normalQuantile(0.8) * standardError[k], 12);
      expect(value - lower[k]).toBeCloseTo(normalQuantile(0.8) * standardError[k], 12);
    });
  });

  it.each(curved.filter(([name]) => isPerUnit(name)))("is per unit of what multiplies it: twice the number, twice the contribution: %s", (_name, terms) => {
    const own = fitModel(modelOf("gaussian", terms), rows);
    const { id, columns: [column, by] } = own.terms[own.terms.length - 1];
    const { x, estimate } = termCurve(own, id, column === "price" ? { points: 5 } : {});
    const data = { ...rowsAt(own, id, { x }), [by]: Array.from<number | string>(x).map(() => 2) } as ModelData;
    expect(largestDifference(predict(own, data).contributions[id], estimate.map((value) => 2 * value))).toBeLessThan(1e-12);
  });
});
