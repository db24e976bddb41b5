import { covarianceQuadratic, fitModel, predict, termCurve } from "@shared/engine";
import type { FittedModel, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf } from "../support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "../support/measures";

/** A factor's coefficients by its reference level: differences between levels do not depend on it, nor on how rows come. */
const rows = everyKindRows(101, 80);
const levels = ["display", "feature", "none"];
const beside: TermSpec[] = everyKind.smooth;
const factor = (reference?: string): TermSpec => ({ kind: "factor", column: "promotion", ...(reference === undefined ? {} : { reference }) });
const effectsOf = ({ coefficients, terms }: FittedModel): number[] => {
  const { first, count } = terms[terms.length - 1];
  return Array.from(coefficients.slice(first, first + count));
};

/** Standard error of one level's effect less another's. */
function errorBetween(model: FittedModel, left: number, right: number): number {
  const { first } = model.terms[model.terms.length - 1];
  const gradient = new Float64Array(model.coefficients.length);
  gradient[first + left] += 1;
  gradient[first + right] -= 1;
  return Math.sqrt(covarianceQuadratic(model, gradient, gradient));
}

describe.each(families)("A factor in a %s model", (family) => {
  const fit = (reference?: string, order?: number[]) => fitModel(modelOf(family, [...beside, factor(reference)]), order === undefined ? rows : inOrder(rows, order));
  const plain = fit();

  it("has its first level in order for a reference, however the rows come, with a coefficient of nothing", () => {
    const turned = fit(undefined, rows.y.map((_, row) => (row * 37 + 11) % 80));
    for (const model of [plain, turned, fit("display")]) {
      expect(effectsOf(model)[0]).toBe(0);
      expect(largestDifference(effectsOf(model), effectsOf(plain))).toBeLessThan(1e-5);
      expect(model.coefficientNames.slice(-3)).toEqual(levels.map((level) => `promotion[${level}]`));
    }
  });

  it.each(levels)("moves to another by a constant, which the intercept takes: %s", (reference) => {
    const model = fit(reference);
    const at = levels.indexOf(reference);
    const shift = effectsOf(plain)[at];
    expect(effectsOf(model)[at]).toBe(0);
    expect(largestDifference(effectsOf(model), effectsOf(plain).map((effect) => effect - shift))).toBeLessThan(1e-5);
    expect(model.coefficients[0] - plain.coefficients[0]).toBeCloseTo(shift, 4);
    expect(largestRelativeDifference(model.fitted, plain.fitted)).toBeLessThan(1e-5);
    expect(largestRelativeDifference(predict(model, rows).standardError, predict(plain, rows).standardError)).toBeLessThan(1e-4);
    expect(model.edf).toBeCloseTo(plain.edf, 5);
  });

  it.each(levels)("has differences of levels as sure by any reference: %s", (reference) => {
    const model = fit(reference);
    for (const [left, right] of [[0, 1], [0, 2], [1, 2]]) expect(errorBetween(model, left, right) / errorBetween(plain, left, right)).toBeCloseTo(1, 4);
    const { standardError, estimate } = termCurve(model, "promotion");
    const at = levels.indexOf(reference);
    expect([standardError[at], estimate[at]]).toEqual([0, 0]);
    levels.forEach((_level, k) => expect(standardError[k]).toBeCloseTo(k === at ? 0 : errorBetween(plain, k, at), 5));
  });
});
