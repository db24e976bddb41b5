import { designRows, extendModel, fitModel, predict, residuals, supportCounts, termCurve } from "@shared/engine";
import type { ModelData, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

const rows = everyKindRows(61, 80);
const lastWeek = Math.max(...rows.week);
const [least, most] = [Math.min(...rows.price), Math.max(...rows.price)];
const fit = (terms: readonly TermSpec[]) => fitModel(modelOf("gaussian", terms), rows);

describe.each(Object.entries(everyKind))("A model with a %s", (_name, terms) => {
  it.each(families)("predicts no rows as nothing: %s", (family) => {
    const none = Object.fromEntries(Object.keys(rows).map((name) => [name, [] as number[]]));
    const { mean, lower, upper, standardError, contributions, outside } = predict(fitModel(modelOf(family, terms), rows), none);
    const lists = [mean, lower, upper, standardError, ...Object.values(contributions), ...Object.values(outside)];
    expect(lists.every(({ length }) => length === 0)).toBe(true);
  });

  it("gives a row the same prediction whatever stands beside it, and as often as it is asked", () => {
    const model = fit(terms);
    const order = [3, 3, 70, 12, 3];
    const { linearPredictor, standardError } = predict(model, inOrder(rows, order));
    const whole = predict(model, rows);
    expect([...linearPredictor]).toEqual(order.map((row) => whole.linearPredictor[row]));
    expect([...standardError]).toEqual(order.map((row) => whole.standardError[row]));
  });

  it("needs no response, offset or weights it was not given, and takes typed columns as lists", () => {
    const model = fit(terms);
    const { y: _y, sales: _sales, counts: _counts, share: _share, ...drivers } = rows;
    const typed = Object.fromEntries(Object.entries(drivers).map(([name, column]) => [name, typeof column[0] === "number" ? Float64Array.from(column as number[]) : column])) as ModelData;
    expect(predict(model, typed)).toEqual(predict(model, rows));
  });

  it("leaves the rows and itself as they were", () => {
    const model = fit(terms);
    const data = { ...inOrder(rows, [0, 1]), week: [lastWeek + 3, lastWeek], store: ["new", "north"], price: [5, 1.2] };
    const before = structuredClone({ model, data });
    predict(model, data, { interval: "observation" });
    extendModel(model, data);
    expect({ model, data }).toEqual(before);
  });

  it.each([0, -0.1, 1, 1.2, Number.NaN])("has no interval of level %s", (level) => {
    expect(() => predict(fit(terms), rows, { level })).toThrow(`level is ${level}; it must be above 0 and below 1.`);
  });
});

describe("A row is flagged where a term is used beyond what it was fitted to", () => {
  const beyond: [string, TermSpec[], Partial<Record<keyof typeof rows, (number | string)[]>>, number[]][] = [
    ["a line, by its range", [{ kind: "linear", column: "price" }], { price: [least, most, least - 1e-9, most + 1e-9] }, [0, 0, 1, 1]],
    ["a smooth of a logarithm, in its own unit", everyKind.smooth, { price: [least, most, 0.01, 100] }, [0, 0, 1, 1]],
    ["a circle, never", everyKind.circle, { season: [0.999, 17.2, -3, 0.5] }, [0, 0, 0, 0]],
    ["a natural spline, by its range", everyKind["natural spline"], { price: [least - 0.001, 1.5, 1.5, 9] }, [1, 0, 0, 1]],
    ["a surface, by either range", everyKind["tensor product"], { price: [1.5, 9, 1.5, 9], temperature: [10, 10, 90, 90] }, [0, 1, 1, 1]],
    ["weeks before and after", everyKind["random walk"], { week: [4, 5, lastWeek, lastWeek + 1] }, [1, 0, 0, 1]],
    ["groups never seen", everyKind["random effect"], { store: ["north", "centre", "west", "NORTH"] }, [0, 1, 0, 1]],
    ["a group's curve, by the column and by the group", everyKind["factor-smooth"], { price: [1.5, 9, 1.5, 9], store: ["north", "north", "new", "new"] }, [0, 1, 1, 1]],
    ["a factor, never: a level never seen is refused", everyKind.factor, { promotion: ["none", "feature", "display", "none"] }, [0, 0, 0, 0]],
    ["a curve times a number, by the column alone", everyKind["smooth times a number"], { price: [1.5, 9, 1.5, 0.1], depth: [99, 0, 0, 0] }, [0, 1, 0, 1]],
  ];

  it.each(beyond)("%s", (_name, terms, change, flags) => {
    const model = fit(terms);
    const data = { ...inOrder(rows, [0, 1, 2, 3]), ...change } as ModelData;
    expect([...predict(model, data).outside[model.terms[model.terms.length - 1].id]]).toEqual(flags);
  });
});

describe("Rows at the edges of what is known", () => {
  it("of an offset without an end are refused, and of a column of another length", () => {
    const model = fitModel(modelOf("gaussian", everyKind.smooth, { offset: "depth" }), rows);
    expect(() => predict(model, { price: [1.2], depth: [Infinity] })).toThrow('Column "depth" (offset) must be finite; row 1 is Infinity.');
    expect(() => predict(model, { price: [1.2], depth: [1, 2] })).toThrow('Column "depth" has 2 rows, "price" has 1; all columns must have the same length.');
    expect(() => predict(model, { price: [1.2] })).toThrow('Column "depth" (offset) is missing; the data has "price".');
  });

  it("of a model of nothing but its level have as many rows as are given, or none", () => {
    const model = fitModel(modelOf("gaussian", []), rows);
    expect(predict(model, { anything: [1, 2, 3] }).mean).toHaveLength(3);
    expect(predict(model, {}).mean).toHaveLength(0);
    const { lower, upper, mean, standardError } = predict(model, { anything: ["a"] });
    expect(upper[0] - mean[0]).toBeCloseTo(1.959963984540054 * standardError[0], 12);
    expect(mean[0] - lower[0]).toBeCloseTo(upper[0] - mean[0], 12);
    expect(standardError[0]).toBeCloseTo(Math.sqrt(model.dispersion / 80), 12);
  });

  it("of two groups never seen share nothing but the chain, of one all of its own: contributions are equal, errors too", () => {
    const model = fit(everyKind["factor-smooth"]);
    const { contributions, standardError } = predict(model, { price: [1.3, 1.3, 1.3], store: ["a", "b", "a"] });
    expect(new Set(contributions["price:store"])).toEqual(new Set([0]));
    expect(standardError[0]).toBeCloseTo(standardError[1], 12);
    expect(standardError[0]).toBe(standardError[2]);
  });

  it("of a new group far from the middle are less sure than in it: a slope of its own is unknown too", () => {
    const model = fit(everyKind["factor-smooth"]);
    const middle = Math.exp(rows.price.reduce((sum, value) => sum + Math.log(value), 0) / rows.price.length);
    const extra = (price: number) => {
      const [fresh, chain] = ["new", "north"].map((store) => predict(model, { price: [price], store: [store] }).standardError[0] ** 2);
      return fresh - chain;
    };
    expect(extra(4 * middle)).toBeGreaterThan(2 * extra(middle));
  });

  it("in the last of 520 weeks ahead have that many steps of variance more than the last known one; one further is refused", () => {
    const model = fit([{ kind: "random-walk", column: "week", smoothness: { penalty: 7 } }]);
    const errors = predict(model, { week: [lastWeek, lastWeek + 520] }).standardError;
    expect(errors[1] ** 2 - errors[0] ** 2).toBeCloseTo((520 * model.dispersion) / 7, 9);
    expect(() => predict(model, { week: [lastWeek + 521] })).toThrow(
      `Column "week" (random-walk): row 1 is ${lastWeek + 521}, 521 weeks from those fitted to (5 to ${lastWeek}); a level is carried on for at most 520.`,
    );
  });

  it("extend a model by weeks and groups in one go as one after the other", () => {
    const model = fit([{ kind: "random-walk", column: "week", smoothness: { penalty: 7 } }, ...everyKind["random effect"]]);
    const data: ModelData = { price: [1.2], week: [lastWeek + 4], store: ["new"] };
    const onceMore = extendModel(extendModel(model, data), data);
    expect(onceMore.coefficientNames).toEqual(extendModel(model, data).coefficientNames);
    expect(predict(extendModel(model, data), data).standardError[0]).toBeCloseTo(predict(model, data).standardError[0], 12);
    expect(extendModel(model, rows)).toBe(model);
    expect(extendModel(model, data).coefficientNames).toContain("store[new]");
    expect(extendModel(model, data).coefficientNames).toContain(`week[${lastWeek + 4}]`);
  });

  it("have residuals where their group is new: those of the chain's average", () => {
    const model = fit(everyKind["random effect"]);
    const data = { price: [1.3], store: ["new"], y: [2] };
    expect(residuals(model, data, { kind: "response" })[0]).toBeCloseTo(2 - predict(model, data).mean[0], 12);
  });

  it("have design rows that times the coefficients are the predictor without its offset", () => {
    const model = fitModel(modelOf("gaussian", [...everyKind.smooth, ...everyKind.circle], { offset: "depth" }), rows);
    const { count, offset, parts } = designRows(model, rows);
    expect([count, parts.map(({ id }) => id)]).toEqual([80, ["intercept", "price", "season"]]);
    expect([...offset]).toEqual(rows.depth);
  });

  it("count as support from the range's ends inwards, a curve drawn beyond as none", () => {
    const model = fit([{ kind: "smooth", column: "temperature", size: 6 }]);
    const [term] = model.terms;
    const [from, to] = term.observedRange ?? [0, 0];
    const near = (x: number) => rows.temperature.filter((value) => Math.abs(value - x) <= (to - from) / 20 + 1e-12).length;
    const at = Float64Array.of(from, (from + to) / 2, to, to + (to - from) / 21, to + (to - from));
    expect([...supportCounts(term, at)]).toEqual(Array.from(at, near));
    expect(largestDifference(termCurve(model, "temperature", { at: Array.from(at) }).supportCount, Array.from(at, near))).toBe(0);
  });
});
