import { squareOfLower } from "./tiles";

/**
 * Dense Cholesky factorisation and what follows from it, on row-major square matrices in a Float64Array.
 * Plain loops: at the 20 to 60 columns of a sales model they are quicker than a library's general matrices. Two rows by two
 * columns at a time: four sums side by side need not wait for one another, which halves the time.
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
  const even = size - (size % 2);
  for (let row = 0; row < even; row += 2) {
    const upper = row * size;
    const lower = upper + size;
    for (let column = 0; column < row; column += 2) {
      const first = column * size;
      const second = first + size;
      let s00 = matrix[upper + column];
      let s01 = matrix[upper + column + 1];
      let s10 = matrix[lower + column];
      let s11 = matrix[lower + column + 1];
      for (let k = 0; k < column; k++) {
        const a0 = matrix[upper + k];
        const a1 = matrix[lower + k];
        const b0 = matrix[first + k];
        const b1 = matrix[second + k];
        s00 -= a0 * b0;
        s01 -= a0 * b1;
        s10 -= a1 * b0;
        s11 -= a1 * b1;
      }
      s00 /= matrix[first + column];
      s10 /= matrix[first + column];
      matrix[upper + column] = s00;
      matrix[lower + column] = s10;
      matrix[upper + column + 1] = (s01 - s00 * matrix[second + column]) / matrix[second + column + 1];
      matrix[lower + column + 1] = (s11 - s10 * matrix[second + column]) / matrix[second + column + 1];
    }
    if (!finishRow(matrix, { size, row, from: row }, least) || !finishRow(matrix, { size, row: row + 1, from: row }, least)) return false;
  }
  return even === size || finishRow(matrix, { size, row: even, from: 0 }, least);
}

/** A row's entries from column `from` on, and its pivot. */
function finishRow(matrix: Float64Array, at: { size: number; row: number; from: number }, least: Float64Array | undefined): boolean {
  const { size, row, from } = at;
  const start = row * size;
  for (let column = from; column < row; column++) {
    let sum = matrix[start + column];
    for (let k = 0; k < column; k++) sum -= matrix[start + k] * matrix[column * size + k];
    matrix[start + column] = sum / matrix[column * size + column];
  }
  let pivot = matrix[start + row];
  for (let k = 0; k < row; k++) pivot -= matrix[start + k] * matrix[start + k];
  if (least !== undefined && row < least.length && pivot < least[row]) pivot = least[row];
  if (!(pivot > 0)) return false;
  matrix[start + row] = Math.sqrt(pivot);
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
 * @param factor lower triangle as left by `choleskyInPlace`, which is replaced by its own inverse.
 * @param inverse receives the symmetric inverse, row-major size x size.
 * @example invertFactored(factor, size, inverse);
 */
export function invertFactored(factor: Float64Array, size: number, inverse: Float64Array): void {
  invertLower(factor, size);
  squareOfLower(factor, size, inverse);
}

/** L^-1 in place, a pair of rows from the pairs above, each from left to right: what is still needed of L stands to the right. */
function invertLower(factor: Float64Array, size: number): void {
  const even = size - (size % 2);
  for (let row = 0; row < even; row += 2) {
    const upper = row * size;
    const lower = upper + size;
    const first = 1 / factor[upper + row];
    const second = 1 / factor[lower + row + 1];
    const between = factor[lower + row];
    for (let column = 0; column < row; column += 2) {
      let at = column * size + column;
      let s00 = factor[upper + column] * factor[at] + factor[upper + column + 1] * factor[at + size];
      let s01 = factor[upper + column + 1] * factor[at + size + 1];
      let s10 = factor[lower + column] * factor[at] + factor[lower + column + 1] * factor[at + size];
      let s11 = factor[lower + column + 1] * factor[at + size + 1];
      at += 2 * size;
      for (let k = column + 2; k < row; k++, at += size) {
        const a0 = factor[upper + k];
        const a1 = factor[lower + k];
        const b0 = factor[at];
        const b1 = factor[at + 1];
        s00 += a0 * b0;
        s01 += a0 * b1;
        s10 += a1 * b0;
        s11 += a1 * b1;
      }
      factor[upper + column] = -s00 * first;
      factor[upper + column + 1] = -s01 * first;
      factor[lower + column] = -(s10 - between * s00 * first) * second;
      factor[lower + column + 1] = -(s11 - between * s01 * first) * second;
    }
    factor[upper + row] = first;
    factor[lower + row] = -between * first * second;
    factor[lower + row + 1] = second;
  }
  if (even < size) invertLastRow(factor, size);
}

function invertLastRow(factor: Float64Array, size: number): void {
  const last = size - 1;
  const reciprocal = 1 / factor[last * size + last];
  for (let column = 0; column < last; column++) {
    let sum = 0;
    for (let k = column; k < last; k++) sum += factor[last * size + k] * factor[k * size + column];
    factor[last * size + column] = -sum * reciprocal;
  }
  factor[last * size + last] = reciprocal;
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
