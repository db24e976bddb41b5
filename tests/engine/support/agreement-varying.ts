import { fitModel, predict } from "@shared/engine";
import { expect } from "vitest";
import { expectGamAgreement, gaussianTolerances } from "./gam-agreement";
import { largestDifference, largestRelativeDifference, standardDeviation } from "./measures";
import type { VaryingCurves } from "./reference-shapes";

/** A curve per level: at the rows, and at new rows beyond the range too. */
export function expectLevelAgreement({ byLevel }: VaryingCurves): void {
  const { data, fit, size, newRows } = byLevel;
  const model = fitModel({
    response: "y", family: "gaussian",
    terms: [{ kind: "factor", column: "area" }, { kind: "smooth", id: "curves", column: "x", by: "area", size }],
  }, data);
  expectGamAgreement({ model, data, summary: fit, terms: { curves: [0, 1, 2] }, within: gaussianTolerances });
  const there = predict(model, newRows);
  const scale = standardDeviation(fit.linearPredictor);
  expect(largestDifference(there.linearPredictor, byLevel.linearPredictor) / scale).toBeLessThan(gaussianTolerances.fitted);
  expect(largestRelativeDifference(there.standardError, byLevel.standardError)).toBeLessThan(gaussianTolerances.standardError);
}

/** A curve times a number. */
export function expectNumberAgreement({ byNumber }: VaryingCurves): void {
  const { data, fit, size } = byNumber;
  const model = fitModel({
    response: "y", family: "gaussian",
    terms: [{ kind: "smooth", id: "curve", column: "x", by: "amount", size }, { kind: "linear", column: "other" }],
  }, data);
  expectGamAgreement({ model, data, summary: fit, terms: { curve: [0] }, within: gaussianTolerances });
}

/** Two curves and their interaction without main effects. */
export function expectSurfaceAgreement({ data, fit, size, sizes }: VaryingCurves["surfaces"][number]): void {
  const model = fitModel({
    response: "y", family: "gaussian",
    terms: [
      { kind: "smooth", column: "x", size }, { kind: "smooth", column: "z", size },
      { kind: "tensor-product", id: "together", columns: ["x", "z"], sizes },
    ],
  }, data);
  expectGamAgreement({ model, data, summary: fit, terms: { x: [0], z: [1], together: [2] }, within: gaussianTolerances });
  const { together } = predict(model, data).contributions;
  expect(largestDifference(together, fit.interaction) / standardDeviation(fit.linearPredictor)).toBeLessThan(gaussianTolerances.fitted);
}
