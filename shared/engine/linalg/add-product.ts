/** A row-major block of `count` rows. */
type Block = { values: Float64Array; count: number; width: number };

/**
 * out += times x left x right, skipping zeros of `left`, which may be mostly zeros. O(entries of left x right.width).
 *
 * @param left row-major count x width. right: `left.width` rows. Neither is changed.
 * @param out row-major left.count x right.width. Changed.
 * @example addProduct({ values: Float64Array.of(1, 2), count: 1, width: 2 }, { values: Float64Array.of(3, 4), count: 2, width: 1 }, 1, out); // out: 11
 */
export function addProduct(left: Block, right: Block, times: number, out: Float64Array): void {
  const { width } = right;
  for (let row = 0; row < left.count; row++) {
    const to = row * width;
    for (let k = 0; k < left.width; k++) {
      const weight = times * left.values[row * left.width + k];
      if (weight === 0) continue;
      const from = k * width;
      for (let column = 0; column < width; column++) out[to + column] += weight * right.values[from + column];
    }
  }
}
