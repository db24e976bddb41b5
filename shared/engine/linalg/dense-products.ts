/**
 * Products of row-major blocks, four rows at a time, so that each entry of the larger matrix is read once for four uses.
 */

/**
 * Lower triangle of `out` -= rows' rows. O(count x width^2 / 2).
 *
 * @param rows row-major count x width. Not changed.
 * @param out row-major width x width; its lower triangle is changed.
 * @example subtractSquare(Float64Array.of(1, 2), { count: 1, width: 2 }, out); // out: -1, ., -2, -4
 */
export function subtractSquare(rows: Float64Array, { count, width }: { count: number; width: number }, out: Float64Array): void {
  let row = 0;
  for (; row + 4 <= count; row += 4) subtractFour(rows, row * width, width, out);
  for (; row < count; row++) {
    const from = row * width;
    for (let i = 0; i < width; i++) {
      const left = rows[from + i];
      if (left === 0) continue;
      const to = i * width;
      for (let j = 0; j <= i; j++) out[to + j] -= left * rows[from + j];
    }
  }
}

function subtractFour(rows: Float64Array, first: number, width: number, out: Float64Array): void {
  const second = first + width;
  const third = second + width;
  const fourth = third + width;
  for (let i = 0; i < width; i++) {
    const a = rows[first + i];
    const b = rows[second + i];
    const c = rows[third + i];
    const d = rows[fourth + i];
    const to = i * width;
    for (let j = 0; j <= i; j++) {
      out[to + j] -= a * rows[first + j] + b * rows[second + j] + c * rows[third + j] + d * rows[fourth + j];
    }
  }
}

/**
 * out = rows x matrix. O(count x width^2).
 *
 * @param rows row-major count x width. matrix row-major width x width. Neither is changed.
 * @param out receives count x width. Must not be `rows`.
 * @example multiplyRows(Float64Array.of(1, 2), { count: 1, width: 2 }, identity, out); // out: 1, 2
 */
export function multiplyRows(
  rows: Float64Array, { count, width }: { count: number; width: number }, matrix: Float64Array, out: Float64Array,
): void {
  out.fill(0, 0, count * width);
  let row = 0;
  for (; row + 4 <= count; row += 4) multiplyFour({ rows, first: row * width, width }, matrix, out);
  for (; row < count; row++) {
    const from = row * width;
    for (let i = 0; i < width; i++) {
      const weight = rows[from + i];
      if (weight === 0) continue;
      const at = i * width;
      for (let j = 0; j < width; j++) out[from + j] += weight * matrix[at + j];
    }
  }
}

function multiplyFour(of: { rows: Float64Array; first: number; width: number }, matrix: Float64Array, out: Float64Array): void {
  const { rows, first, width } = of;
  const second = first + width;
  const third = second + width;
  const fourth = third + width;
  for (let i = 0; i < width; i++) {
    const a = rows[first + i];
    const b = rows[second + i];
    const c = rows[third + i];
    const d = rows[fourth + i];
    const at = i * width;
    for (let j = 0; j < width; j++) {
      const value = matrix[at + j];
      out[first + j] += a * value;
      out[second + j] += b * value;
      out[third + j] += c * value;
      out[fourth + j] += d * value;
    }
  }
}
