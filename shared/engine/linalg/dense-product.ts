import { rowProducts } from "./tiles";

/** A row-major block of `count` rows. */
type Block = { values: Float64Array; count: number; width: number };

/**
 * Rows become columns.
 *
 * @param values row-major count x width. Not changed.
 * @example transposed(Float64Array.of(1, 2, 3, 4), 2, 2); // 1, 3, 2, 4
 */
export function transposed(values: Float64Array, count: number, width: number): Float64Array {
  const out = new Float64Array(count * width);
  for (let row = 0; row < count; row++) {
    for (let column = 0; column < width; column++) out[column * count + row] = values[row * width + column];
  }
  return out;
}

/**
 * left x right, as a new row-major block left.count x right.width. O(left.count x left.width x right.width).
 *
 * @param right has `left.width` rows. Neither is changed.
 * @example denseProduct({ values: Float64Array.of(1, 2), count: 1, width: 2 }, { values: Float64Array.of(3, 4), count: 2, width: 1 }); // 11
 */
export function denseProduct(left: Block, right: Block): Float64Array {
  const out = new Float64Array(left.count * right.width);
  const turned = transposed(right.values, right.count, right.width);
  rowProducts(left, { values: turned, count: right.width, width: right.count }, out);
  return out;
}

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
