/** Position of entry (row, column) of a symmetric matrix in its packed lower triangle. */
export const packedIndex = (row: number, column: number): number =>
  row >= column ? (row * (row + 1)) / 2 + column : (column * (column + 1)) / 2 + row;

/**
 * Lower triangle of a row-major square matrix, packed by rows: size (size + 1) / 2 values.
 *
 * @example packLower(Float64Array.of(1, 2, 2, 3), 2); // 1, 2, 3
 */
export function packLower(matrix: Float64Array, size: number): Float64Array {
  const packed = new Float64Array((size * (size + 1)) / 2);
  let at = 0;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column <= row; column++) packed[at++] = matrix[row * size + column];
  }
  return packed;
}

/**
 * left' V right for a packed symmetric V. O(size^2).
 *
 * @example packedQuadratic(model.covariance, gradient, gradient); // a variance
 */
export function packedQuadratic(packed: Float64Array, left: Float64Array, right: Float64Array): number {
  let total = 0;
  let at = 0;
  for (let row = 0; row < left.length; row++) {
    let onRight = 0;
    let onLeft = 0;
    for (let column = 0; column < row; column++) {
      const value = packed[at++];
      onRight += value * right[column];
      onLeft += value * left[column];
    }
    const diagonal = packed[at++];
    total += left[row] * (onRight + diagonal * right[row]) + right[row] * onLeft;
  }
  return total;
}

/**
 * x' V x for a sparse x of `count` entries. O(count^2); rounding below zero is returned as zero.
 *
 * @example sparseVariance(model.covariance, indices, values, count);
 */
export function sparseVariance(packed: Float64Array, indices: Int32Array, values: Float64Array, count: number): number {
  let total = 0;
  for (let i = 0; i < count; i++) {
    const row = indices[i];
    let cross = 0;
    for (let j = 0; j < i; j++) {
      const column = indices[j];
      cross += values[j] * packed[row >= column ? (row * (row + 1)) / 2 + column : (column * (column + 1)) / 2 + row];
    }
    total += values[i] * (2 * cross + values[i] * packed[(row * (row + 1)) / 2 + row]);
  }
  return Math.max(total, 0);
}

/**
 * Moves the entries that are not zero to the front: a local regression's row has many outside its window.
 *
 * @param indices changed, and values with them, in the first `count` entries.
 * @returns how many are left.
 * @example withoutZeros(Int32Array.of(4, 7), Float64Array.of(0, 2), 2); // 1; indices 7, values 2
 */
export function withoutZeros(indices: Int32Array, values: Float64Array, count: number): number {
  let used = 0;
  for (let k = 0; k < count; k++) {
    if (values[k] === 0) continue;
    indices[used] = indices[k];
    values[used++] = values[k];
  }
  return used;
}
