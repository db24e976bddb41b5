import { choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import { packedIndex } from "../linalg/packed-symmetric";
import type { FittedModel, FittedTerm } from "../types";
import { simpleTail } from "./truncated-test";
import type { TruncatedTest } from "./truncated-test";

/**
 * Wald's test of a line or a factor from the coefficients themselves, b' V^-1 b, for models whose fit left no information
 * to test by: those with local regression.
 * Source: Hastie & Tibshirani (1990), section 5.4.
 *
 * @returns null for other kinds, and where V is singular. O(levels^3).
 * @example coefficientTest(model, model.terms[1], 144.7)?.pValue;
 */
export function coefficientTest(model: FittedModel, term: FittedTerm, residual: number | null): TruncatedTest | null {
  const { basis, first, count } = term;
  if (basis.kind !== "linear" && basis.kind !== "factor") return null;
  const leftOut = basis.kind === "factor" ? basis.levels.indexOf(basis.reference) : -1;
  const indices = Array.from({ length: count }, (_, k) => first + k).filter((_index, k) => k !== leftOut);
  const size = indices.length;
  const factor = new Float64Array(size * size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) factor[row * size + column] = model.covariance[packedIndex(indices[row], indices[column])];
  }
  if (size === 0 || !choleskyInPlace(factor, size)) return null;
  const solved = Float64Array.from(indices, (index) => model.coefficients[index]);
  forwardSolve(factor, size, solved);
  const statistic = solved.reduce((sum, value) => sum + value * value, 0);
  return { statistic, rank: size, pValue: Number.isFinite(statistic) ? simpleTail(statistic, size, residual) : NaN };
}
