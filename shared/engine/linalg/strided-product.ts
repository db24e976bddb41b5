/** A matrix within an array: entry (row, k) stands at `at` + row x rowStep + k x innerStep, so that a transpose needs no copy. */
export type Strided = { values: Float64Array; at: number; rows: number; inner: number; rowStep: number; innerStep: number };
/** A row-major matrix within an array, from `at` on. */
export type RowMajor = { values: Float64Array; at: number; columns: number };

/**
 * out = left x right, two rows by two columns at a time. O(rows x inner x columns).
 *
 * @param right has left.inner rows. Neither is changed; `out` must be another array.
 * @param out receives left.rows x right.columns. With `lowerOnly`, for a product known to be symmetric, only its lower
 * triangle (and some entries above it) is written.
 * @example
 * const left = { values: Float64Array.of(1, 2), at: 0, rows: 1, inner: 2, rowStep: 2, innerStep: 1 };
 * stridedProduct(left, { values: Float64Array.of(3, 4), at: 0, columns: 1 }, { values: out, at: 0, lowerOnly: false }); // 11
 */
export function stridedProduct(left: Strided, right: RowMajor, out: { values: Float64Array; at: number; lowerOnly: boolean }): void {
  const { values: a, rows, inner, rowStep, innerStep } = left;
  const { values: b, columns } = right;
  const { values: c, lowerOnly } = out;
  for (let row = 0; row < rows; row += 2) {
    const upper = left.at + row * rowStep;
    // The last of an odd number of rows is taken twice, and the last of the columns.
    const lower = row + 1 < rows ? upper + rowStep : upper;
    const to = out.at + row * columns;
    const below = row + 1 < rows ? to + columns : to;
    const end = lowerOnly ? Math.min(columns, row + 2) : columns;
    for (let column = 0; column < end; column += 2) {
      const beside = column + 1 < columns ? 1 : 0;
      let s00 = 0;
      let s01 = 0;
      let s10 = 0;
      let s11 = 0;
      let from = right.at + column;
      for (let k = 0, step = 0; k < inner; k++, step += innerStep, from += columns) {
        const a0 = a[upper + step];
        const a1 = a[lower + step];
        const b0 = b[from];
        const b1 = b[from + beside];
        s00 += a0 * b0;
        s01 += a0 * b1;
        s10 += a1 * b0;
        s11 += a1 * b1;
      }
      c[to + column] = s00;
      c[to + column + beside] = s01;
      c[below + column] = s10;
      c[below + column + beside] = s11;
    }
  }
}
