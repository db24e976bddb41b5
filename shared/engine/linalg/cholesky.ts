import { squareOfLower } from "./tiles";

/**
 * Dense Cholesky factorisation and what follows from it, on row-major square matrices in a Float64Array.
 * Plain loops: at the 20 to 60 columns of a sales model they are quicker than a library's general matrices.
 * Source: Golub & Van Loan (1996), Matrix Computations, section 4.2.
 */

/**
 * Replaces the lower triangle of a symmetric matrix by its factor L, matrix = L L'.
 * The upper triangle is neither read nor changed. O(size^3 / 6).
 *
 * @param matrix row-major, size x size; only its lower triangle is used. Changed in place.
 * @param least pivots of the first rows, below which rounding is all there is: smaller ones are raised to them. Not changed.
 * @returns false if the matrix is not positive definite; the content is then of no use.
 * @example
 * const factor = Float64Array.of(4, 0, 2, 5); choleskyInPlace(factor, 2); // factor: 2, 0, 1, 2
 */
export function choleskyInPlace(matrix: Float64Array, size: number, least?: Float64Array): boolean {
  for (let row = 0; row < size; row++) {
    const rowStart = row * size;
    for (let column = 0; column < row; column++) {
      const columnStart = column * size;
      let sum = matrix[rowStart + column];
      for (let k = 0; k < column; k++) sum -= matrix[rowStart + k] * matrix[columnStart + k];
      matrix[rowStart + column] = sum / matrix[columnStart + column];
    }
    let pivot = matrix[rowStart + row];
    for (let k = 0; k < row; k++) pivot -= matrix[rowStart + k] * matrix[rowStart + k];
    if (least !== undefined && row < least.length && pivot < least[row]) pivot = least[row];
    if (!(pivot > 0)) return false;
    matrix[rowStart + row] = Math.sqrt(pivot);
  }
  return true;
}

/**
 * Solves L x = vector in place. O(size^2 / 2).
 *
 * @example forwardSolve(Float64Array.of(2, 0, 1, 2), 2, vector); // vector: v0 / 2, (v1 - x0) / 2
 */
export function forwardSolve(factor: Float64Array, size: number, vector: Float64Array): void {
  for (let row = 0; row < size; row++) {
    let sum = vector[row];
    for (let k = 0; k < row; k++) sum -= factor[row * size + k] * vector[k];
    vector[row] = sum / factor[row * size + row];
  }
}

/**
 * Solves L' x = vector in place. O(size^2 / 2).
 *
 * @example forwardSolve(factor, size, b); backwardSolve(factor, size, b); // b: matrix^-1 b
 */
export function backwardSolve(factor: Float64Array, size: number, vector: Float64Array): void {
  for (let row = size - 1; row >= 0; row--) {
    const value = vector[row] / factor[row * size + row];
    vector[row] = value;
    for (let k = 0; k < row; k++) vector[k] -= factor[row * size + k] * value;
  }
}

/**
 * Inverse of the matrix whose factor is given, both triangles. O(size^3 / 3).
 *
 * @param factor lower triangle as left by `choleskyInPlace`; replaced by its own inverse.
 * @param inverse receives the symmetric inverse, row-major size x size.
 * @example invertFactored(factor, size, inverse);
 */
export function invertFactored(factor: Float64Array, size: number, inverse: Float64Array): void {
  invertLower(factor, size);
  squareOfLower(factor, size, inverse);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < row; column++) inverse[column * size + row] = inverse[row * size + column];
  }
}

/** L^-1 in place, row by row from the rows above. */
function invertLower(factor: Float64Array, size: number): void {
  for (let row = 0; row < size; row++) {
    const start = row * size;
    const reciprocal = 1 / factor[start + row];
    for (let k = 0; k < row; k++) {
      const weight = -factor[start + k] * reciprocal;
      const from = k * size;
      factor[start + k] = 0;
      if (weight === 0) continue;
      for (let column = 0; column <= k; column++) factor[start + column] += weight * factor[from + column];
    }
    factor[start + row] = reciprocal;
    factor.fill(0, start + row + 1, start + size);
  }
}

/**
 * Log-determinant of the matrix whose factor is given: 2 sum ln L_kk.
 *
 * @example logDeterminant(Float64Array.of(2, 0, 1, 2), 2); // ln 16
 */
export function logDeterminant(factor: Float64Array, size: number): number {
  let sum = 0;
  for (let k = 0; k < size; k++) sum += Math.log(factor[k * size + k]);
  return 2 * sum;
}
