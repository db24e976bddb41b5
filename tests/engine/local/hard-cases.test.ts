import { EngineError, fitModel, predict, termCurve } from "@shared/engine";
import type { Family, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { salesRows } from "../support/sales-rows";

const base = salesRows(4, 130);
const rows = {
  ...base,
  week: base.price.map((_, row) => row),
  near: base.price.map((price, row) => price + 0.02 * Math.sin(row * 12.9898)),
  started: base.units.map((_, row) => (row < 100 ? 0 : 5)),
};
const local: TermSpec = { kind: "local-regression", column: "price", span: 0.5 };
const families: { family: Family; response: string }[] = [{ family: "gaussian", response: "logUnits" }, { family: "quasi-poisson", response: "units" }];

describe.each(families)("Beside a local regression whose column is all but the same ($family)", ({ family, response }) => {
  const of = (...terms: TermSpec[]): ModelSpec => ({ response, family, terms });

  it.each([1.01, 3, 8.9])("a curve has the %f degrees of freedom asked for", (df) => {
    const model = fitModel(of(local, { kind: "smooth", column: "near", smoothness: { df } }), rows);
    expect(model.converged).toBe(true);
    expect(Math.abs(model.terms[1].edf - df)).toBeLessThan(1e-6);
  });

  it("two local parabolas share what they draw, and the fit rests", () => {
    const parabola = (column: string): TermSpec => ({ kind: "local-regression", column, span: 0.3, degree: 2 });
    const model = fitModel(of(parabola("price"), parabola("near")), rows);
    expect(model.converged).toBe(true);
    expect(model.edf).toBeLessThan(20);
    // What they draw together is known much better than either.
    const { standardError } = predict(model, rows);
    const apart = termCurve(model, "price", { at: rows.price }).standardError;
    expect(Math.max(...standardError)).toBeLessThan(Math.max(...apart));
  });

  it("a slowly moving level in the very column of a local line is told apart by its penalty", () => {
    const model = fitModel(of({ kind: "local-regression", column: "week", span: 0.5 }, { kind: "random-walk", column: "week", id: "level" }), rows);
    expect(model.converged).toBe(true);
    expect(model.fitted.every(Number.isFinite)).toBe(true);
  });
});

describe("A local regression over weeks", () => {
  it("of which the first hundred sold nothing comes to rest, with means near zero there", () => {
    const model = fitModel({ response: "started", family: "quasi-poisson", terms: [{ kind: "local-regression", column: "week", span: 0.2 }] }, rows);
    expect(model.converged).toBe(true);
    expect(model.fitted.slice(0, 80).every((mean) => mean >= 0 && mean < 1e-3)).toBe(true);
    expect(model.fitted.slice(115).every((mean) => Math.abs(mean - 5) < 0.5)).toBe(true);
    expect(model.covariance.every(Number.isFinite)).toBe(true);
  });

  it("so narrow that every week stands by itself leaves nothing to others, and says so", () => {
    const narrow: TermSpec = { kind: "local-regression", column: "week", span: 0.024 };
    const attempt = () => fitModel({ response: "logUnits", family: "gaussian", terms: [narrow, { kind: "smooth", column: "price" }] }, rows);
    expect(attempt).toThrow(EngineError);
    expect(attempt).toThrow(
      'The terms beside the local regression "week" cannot be told apart from it in these rows; leave one out, or use a smooth in its place.',
    );
  });

  it("so narrow and alone gives every row back", () => {
    const model = fitModel({ response: "logUnits", family: "gaussian", terms: [{ kind: "local-regression", column: "week", span: 0.024 }] }, rows);
    expect(largestDifference(model.fitted, rows.logUnits)).toBeLessThan(1e-11);
    expect(model.edf).toBeCloseTo(130, 9);
    expect(Number.isFinite(model.dispersion)).toBe(true);
    expect(model.warnings.map(({ code }) => code)).toEqual(["perfect-fit"]);
  });
});

describe("Values of many rows", () => {
  it("count as rows: each row doubled is the same fit with half the variance", () => {
    const doubled = Object.fromEntries(Object.entries(base).map(([name, column]) => [name, [...column, ...column]]));
    const spec: ModelSpec = { response: "logUnits", family: "gaussian", terms: [local, { kind: "factor", column: "promotion", reference: "none" }] };
    const once = fitModel(spec, base);
    const twice = fitModel(spec, doubled as typeof base);
    expect(largestDifference(twice.fitted.subarray(0, 130), once.fitted)).toBeLessThan(1e-10);
    expect(twice.edf).toBeCloseTo(once.edf, 8);
    const unscaled = (model: typeof once) => predict(model, base).standardError.map((error) => error / Math.sqrt(model.dispersion));
    expect(largestDifference(unscaled(twice).map((error) => error * Math.SQRT2), unscaled(once))).toBeLessThan(1e-9);
  });

  it("and an offset shift the response, no more", () => {
    const offset = base.price.map((price) => Math.log(price));
    const spec: ModelSpec = { response: "logUnits", family: "gaussian", terms: [local, { kind: "smooth", column: "temperature" }] };
    const moved = { ...base, offset, logUnits: base.logUnits.map((value, row) => value + offset[row]) };
    const plain = fitModel(spec, base);
    const shifted = fitModel({ ...spec, offset: "offset" }, moved);
    expect(largestDifference(shifted.fitted.map((value, row) => value - offset[row]), plain.fitted)).toBeLessThan(1e-10);
    expect(largestDifference(predict(shifted, moved).linearPredictor, shifted.fitted)).toBeLessThan(1e-10);
  });
});
