import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { choleskyInPlace } from "../linalg/cholesky";
import { chiSquareTail, fTail, weightedChiSquareTail } from "./weighted-chi-square";

/** What a test of some coefficients' function starts from, all in the same coordinates. */
export type FunctionUnderTest = {
  /** Estimates. */
  estimate: Float64Array;
  /** Their posterior covariance with the dispersion, row-major. */
  covariance: Float64Array;
  /** X'WX of the function's columns, row-major. */
  information: Float64Array;
  /** Degrees of freedom that the rank is taken from. */
  rank: number;
  /** n - edf where the dispersion is estimated, null where it is known. */
  residualDegrees: number | null;
  /** Direction by which the eigenvectors' signs are settled. */
  orientation: Float64Array;
};

export type TruncatedTest = { statistic: number; rank: number; pValue: number };

/** Eigenvalues below this share of the largest are rounding. */
const smallestShare = 1e-14;

/**
 * Test that a function f = X b is zero: T = f' V^(r-) f with V = X cov X' and V^(r-) its pseudoinverse of fractional rank r:
 * with k = floor(r) and v = r - k, whole up to eigenvector k - 1, and for the pair k, k + 1 the matrix
 * [1, p; p, v], p = sqrt(v (1 - v) / 2), in standardised components. T then is a sum of k - 1 chi-squares and two weighted
 * ones, over the dispersion's where that is estimated. As the sign of p is no one's choice, the p-value is the mean of both.
 * Source: Wood (2013), Biometrika 100, 221-228, sections 2 and 3.
 *
 * @returns null where the covariance is singular. `rank` is r, less where fewer eigenvalues are above rounding, 1 below 1.
 * O(size^3).
 * @example truncatedTest({ estimate, covariance, information, rank: 3.4, residualDegrees: 90, orientation })?.pValue;
 */
export function truncatedTest(of: FunctionUnderTest): TruncatedTest | null {
  const components = standardisedComponents(of);
  if (components === null || components.length === 0) return null;
  const rank = Math.min(of.rank, components.length);
  const whole = Math.floor(rank);
  const part = rank - whole;
  const squares = (count: number) => components.slice(0, count).reduce((sum, value) => sum + value * value, 0);
  if (whole === 0) return { statistic: squares(1), rank: 1, pValue: simpleTail(squares(1), 1, of.residualDegrees) };
  if (part < 1e-12) return { statistic: squares(whole), rank: whole, pValue: simpleTail(squares(whole), whole, of.residualDegrees) };
  const cross = Math.sqrt((part * (1 - part)) / 2) * 2 * components[whole - 1] * components[whole];
  const middle = squares(whole) + part * components[whole] ** 2;
  const larger = (rank - whole + 1 + Math.sqrt((1 + part) * (1 - part))) / 2;
  const weights = [...new Array<number>(whole - 1).fill(1), larger, part + 1 - larger];
  const tail = (statistic: number) => mixtureTail(Math.max(0, statistic), weights, of.residualDegrees);
  return { statistic: middle + cross, rank, pValue: (tail(middle + cross) + tail(middle - cross)) / 2 };
}

/** P(sum_k w_k chi2(1) > statistic), or of the sum over chi2(residual) / residual. */
export function mixtureTail(statistic: number, weights: readonly number[], residualDegrees: number | null): number {
  const ones = weights.map(() => 1);
  if (residualDegrees === null) return weightedChiSquareTail({ weights, degrees: ones }, statistic);
  return weightedChiSquareTail({ weights: [...weights, -statistic / residualDegrees], degrees: [...ones, residualDegrees] }, 0);
}

/** P of a chi-square, or of an F times its degrees of freedom, above the statistic. */
export const simpleTail = (statistic: number, degrees: number, residualDegrees: number | null): number =>
  (residualDegrees === null ? chiSquareTail(statistic, degrees) : fTail(statistic / degrees, degrees, residualDegrees));

/**
 * u_j' f / sqrt(lambda_j) for the eigenvectors of V, largest eigenvalue first. With cov = L L' the eigenvalues are those of
 * A = L' X'WX L, and with A's eigenvectors e_j the component is e_j' L' X'WX b / lambda_j.
 */
function standardisedComponents({ estimate, covariance, information, orientation }: FunctionUnderTest): number[] | null {
  const size = estimate.length;
  const factor = covariance.slice();
  if (!choleskyInPlace(factor, size)) return null;
  const root = new Matrix(size, size);
  for (let row = 0; row < size; row++) for (let column = 0; column <= row; column++) root.set(row, column, factor[row * size + column]);
  const seen = root.transpose().mmul(Matrix.from1DArray(size, size, information));
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(seen.mmul(root), { assumeSymmetric: true });
  const projected = eigenvectorMatrix.transpose().mmul(seen.mmul(Matrix.columnVector(estimate)));
  const towards = eigenvectorMatrix.transpose().mmul(seen.mmul(Matrix.columnVector(orientation)));
  const largest = realEigenvalues.reduce((most, value) => Math.max(most, value), 0);
  const components: number[] = [];
  for (let at = size - 1; at >= 0 && realEigenvalues[at] > smallestShare * largest; at--) {
    const sign = towards.get(at, 0) < 0 ? -1 : 1;
    components.push((sign * projected.get(at, 0)) / realEigenvalues[at]);
  }
  return components;
}
