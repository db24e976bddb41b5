import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import { mixtureTail } from "./truncated-test";
import type { TruncatedTest } from "./truncated-test";

/** Coefficients wholly under a penalty, without the dispersion: C their block of (X'WX + S)^-1. */
export type ComponentUnderTest = {
  estimate: Float64Array;
  /** C, row-major. */
  covariance: Float64Array;
  /** Their block of (X'WX + S)^-1 S' (X'WX + S)^-1; S' is S without the penalties of other terms taken for random. */
  penaltyShare: Float64Array;
  dispersion: number;
  residualDegrees: number | null;
};

/** Eigenvalues below this share of the largest are rounding. */
const smallestShare = 1e-12;

/**
 * Test that a term wholly under a penalty (levels of groups, a curve on a circle, a random walk) is zero, its variance
 * component likewise: T = b' C^-1 b / dispersion. Without the term, b has the covariance (C - C S' C) dispersion, so T is
 * sum_j e_j chi2(1) with e the eigenvalues of I - C^-1 (C S' C), over the dispersion's chi-square where that is estimated.
 * Source: Wood (2013), A simple test for random effects in regression models, Biometrika 100, 1005-1010, section 2.
 *
 * @returns null where C is singular; `rank` counts the eigenvalues above rounding. O(size^3).
 * @example varianceComponentTest({ estimate, covariance, penaltyShare, dispersion: 1, residualDegrees: null })?.pValue;
 */
export function varianceComponentTest(of: ComponentUnderTest): TruncatedTest | null {
  const size = of.estimate.length;
  const factor = of.covariance.slice();
  if (!choleskyInPlace(factor, size)) return null;
  const solved = of.estimate.slice();
  forwardSolve(factor, size, solved);
  const statistic = solved.reduce((sum, value) => sum + value * value, 0) / of.dispersion;
  const weights = eigenvalues(conjugated(factor, of.penaltyShare, size));
  const largest = weights.reduce((most, value) => Math.max(most, value), 0);
  const kept = weights.filter((value) => value > smallestShare * largest);
  if (kept.length === 0) return null;
  return { statistic, rank: kept.length, pValue: mixtureTail(statistic, kept, of.residualDegrees) };
}

/** I - L^-1 matrix L^-T. */
function conjugated(factor: Float64Array, matrix: Float64Array, size: number): Matrix {
  const half = new Float64Array(size * size);
  for (let column = 0; column < size; column++) {
    const solved = Float64Array.from({ length: size }, (_, row) => matrix[row * size + column]);
    forwardSolve(factor, size, solved);
    half.set(solved, column * size);
  }
  // `half` holds (L^-1 matrix)' by rows: solving its columns once more gives L^-1 matrix' L^-T.
  const out = Matrix.eye(size, size);
  for (let column = 0; column < size; column++) {
    const solved = Float64Array.from({ length: size }, (_, row) => half[row * size + column]);
    forwardSolve(factor, size, solved);
    for (let row = 0; row < size; row++) out.set(row, column, out.get(row, column) - solved[row]);
  }
  return out;
}

const eigenvalues = (matrix: Matrix): number[] =>
  new EigenvalueDecomposition(matrix, { assumeSymmetric: true }).realEigenvalues;
