import { choleskyDropping } from "../linalg/dropping-cholesky";

/**
 * Cross-products of the later columns less what the first `count` of them reproduce: M_bb - M_ba M_aa^-1 M_ab. First
 * columns that earlier ones reproduce are passed over. O(size^3).
 *
 * @param matrix row-major size x size. Not changed.
 * @returns row-major, (size - count) squared.
 * @example withoutSpan(Float64Array.of(1, 2, 2, 5), 2, 1); // 1
 */
export function withoutSpan(matrix: Float64Array, size: number, count: number): Float64Array {
  const rest = size - count;
  const factor = new Float64Array(count * count);
  for (let row = 0; row < count; row++) factor.set(matrix.subarray(row * size, row * size + count), row * count);
  const dropped = new Set(choleskyDropping(factor, count, null).map(({ column }) => column));
  // Rows of L^-1 M_ab.
  const solved = new Float64Array(count * rest);
  for (let row = 0; row < count; row++) {
    if (dropped.has(row)) continue;
    for (let column = 0; column < rest; column++) {
      let sum = matrix[row * size + count + column];
      for (let k = 0; k < row; k++) sum -= factor[row * count + k] * solved[k * rest + column];
      solved[row * rest + column] = sum / factor[row * count + row];
    }
  }
  const out = new Float64Array(rest * rest);
  for (let row = 0; row < rest; row++) {
    for (let column = 0; column < rest; column++) {
      let sum = matrix[(count + row) * size + count + column];
      for (let k = 0; k < count; k++) sum -= solved[k * rest + row] * solved[k * rest + column];
      out[row * rest + column] = sum;
    }
  }
  return out;
}
