/** P D A = L U: rows scaled by D to a largest entry of one, then put in `order`; L (unit diagonal) and U in one matrix. */
export type PivotedLu = {
  size: number;
  factor: Float64Array;
  order: Int32Array;
  scale: Float64Array;
  /** Smallest pivot of the scaled matrix, 0 where it is singular: near 1e-16 it is singular to rounding. */
  smallestPivot: number;
};

/**
 * Factors a general square matrix by Gaussian elimination with partial pivoting on rows of equal size.
 * Source: Golub & Van Loan (1996), sections 3.4 and 3.5.2 (row scaling). O(size^3 / 3).
 *
 * @param matrix row-major size x size. Changed in place: it becomes the factor.
 * @example solveLu(pivotedLu(Float64Array.of(0, 2, 4, 0), 2), Float64Array.of(2, 4), 1); // 1, 1
 */
export function pivotedLu(matrix: Float64Array, size: number): PivotedLu {
  const order = Int32Array.from({ length: size }, (_, row) => row);
  const scale = scaleRows(matrix, size);
  let smallestPivot = size === 0 ? 1 : Infinity;
  for (let step = 0; step < size; step++) {
    exchange(matrix, order, { size, step, with: largestBelow(matrix, size, step) });
    const from = step * size;
    const pivot = matrix[from + step];
    smallestPivot = Math.min(smallestPivot, Math.abs(pivot));
    if (pivot === 0) continue;
    for (let row = step + 1; row < size; row++) {
      const to = row * size;
      const share = matrix[to + step] / pivot;
      matrix[to + step] = share;
      if (share === 0) continue;
      for (let column = step + 1; column < size; column++) matrix[to + column] -= share * matrix[from + column];
    }
  }
  return { size, factor: matrix, order, scale, smallestPivot: Number.isFinite(smallestPivot) ? smallestPivot : 0 };
}

/** Divides each row by its largest entry; a row of zeros stays. */
function scaleRows(matrix: Float64Array, size: number): Float64Array {
  const scale = new Float64Array(size);
  for (let row = 0; row < size; row++) {
    let largest = 0;
    for (let at = row * size; at < (row + 1) * size; at++) largest = Math.max(largest, Math.abs(matrix[at]));
    scale[row] = largest > 0 ? 1 / largest : 1;
    for (let at = row * size; at < (row + 1) * size; at++) matrix[at] *= scale[row];
  }
  return scale;
}

function largestBelow(matrix: Float64Array, size: number, step: number): number {
  let best = step;
  for (let row = step + 1; row < size; row++) {
    if (Math.abs(matrix[row * size + step]) > Math.abs(matrix[best * size + step])) best = row;
  }
  return best;
}

function exchange(matrix: Float64Array, order: Int32Array, of: { size: number; step: number; with: number }): void {
  const { size, step, with: other } = of;
  if (other === step) return;
  const kept = matrix.slice(step * size, (step + 1) * size);
  matrix.copyWithin(step * size, other * size, (other + 1) * size);
  matrix.set(kept, other * size);
  [order[step], order[other]] = [order[other], order[step]];
}

/**
 * Solves A X = block. O(size^2 x columns).
 *
 * @param block row-major size x columns. Not changed.
 * @returns X, row-major size x columns; not finite where the matrix is singular.
 */
export function solveLu({ size, factor, order, scale }: PivotedLu, block: Float64Array, columns: number): Float64Array {
  const out = new Float64Array(size * columns);
  for (let row = 0; row < size; row++) {
    const source = order[row];
    for (let column = 0; column < columns; column++) out[row * columns + column] = scale[source] * block[source * columns + column];
    for (let k = 0; k < row; k++) subtractRow(out, columns, { row, other: k, times: factor[row * size + k] });
  }
  for (let row = size - 1; row >= 0; row--) {
    for (let k = row + 1; k < size; k++) subtractRow(out, columns, { row, other: k, times: factor[row * size + k] });
    for (let column = 0; column < columns; column++) out[row * columns + column] /= factor[row * size + row];
  }
  return out;
}

function subtractRow(block: Float64Array, columns: number, of: { row: number; other: number; times: number }): void {
  const { times } = of;
  if (times === 0) return;
  const to = of.row * columns;
  const from = of.other * columns;
  for (let column = 0; column < columns; column++) block[to + column] -= times * block[from + column];
}
