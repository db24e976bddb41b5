/**
 * Products of row-major blocks, four rows by four columns at a time: sixteen sums stay in registers while eight values are
 * read, which is several times quicker than a sum at a time (Golub & Van Loan 1996, section 1.3).
 */
type Block = { values: Float64Array; count: number; width: number };

/**
 * Lower triangle of `out` -= rows' rows. O(count x width^2 / 2).
 *
 * @param rows row-major count x width. Not changed.
 * @param out row-major width x width; its lower triangle is changed (and entries above it next to the diagonal).
 * @example subtractSquare({ values: Float64Array.of(1, 2), count: 1, width: 2 }, out); // out: -1, ., -2, -4
 */
export function subtractSquare({ values, count, width }: Block, out: Float64Array): void {
  const whole = width - (width % 4);
  for (let i = 0; i < whole; i += 4) {
    for (let j = 0; j <= i; j += 4) squareTile(values, { count, width, i, j, to: i * width + j }, out);
  }
  for (let i = whole; i < width; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let at = 0; at < count * width; at += width) sum += values[at + i] * values[at + j];
      out[i * width + j] -= sum;
    }
  }
}

/**
 * L'L for a lower-triangular L, as the inverse of a matrix from the inverse of its factor; two by two. O(size^3 / 6).
 *
 * @param lower row-major size x size; its upper triangle is not read. Not changed.
 * @param out row-major size x size; both triangles are overwritten.
 * @example squareOfLower(Float64Array.of(1, 0, 2, 3), 2, out); // out: 5, 6, 6, 9
 */
export function squareOfLower(lower: Float64Array, size: number, out: Float64Array): void {
  const even = size - (size % 2);
  for (let i = 0; i < even; i += 2) {
    for (let j = 0; j <= i; j += 2) {
      let at = i * size;
      let s00 = lower[at + i] * lower[at + j];
      let s01 = j === i ? 0 : lower[at + i] * lower[at + j + 1];
      let s10 = 0;
      let s11 = 0;
      for (let row = i + 1; row < size; row++) {
        at += size;
        const a0 = lower[at + i];
        const a1 = lower[at + i + 1];
        const b0 = lower[at + j];
        const b1 = lower[at + j + 1];
        s00 += a0 * b0;
        s01 += a0 * b1;
        s10 += a1 * b0;
        s11 += a1 * b1;
      }
      const to = i * size + j;
      const mirrored = j * size + i;
      out[to] = out[mirrored] = s00;
      out[to + 1] = out[mirrored + size] = s01;
      out[to + size] = out[mirrored + 1] = s10;
      out[to + size + 1] = out[mirrored + size + 1] = s11;
    }
  }
  if (even === size) return;
  const last = even * size;
  for (let k = 0; k < size; k++) out[last + k] = out[k * size + even] = lower[last + even] * lower[last + k];
}

function squareTile(
  values: Float64Array, of: { count: number; width: number; i: number; j: number; to: number }, out: Float64Array,
): void {
  const { count, width, i, j } = of;
  let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
  let s20 = 0, s21 = 0, s22 = 0, s23 = 0, s30 = 0, s31 = 0, s32 = 0, s33 = 0;
  for (let row = 0, a = i, b = j; row < count; row++, a += width, b += width) {
    const b0 = values[b];
    const b1 = values[b + 1];
    const b2 = values[b + 2];
    const b3 = values[b + 3];
    const a0 = values[a];
    s00 += a0 * b0; s01 += a0 * b1; s02 += a0 * b2; s03 += a0 * b3;
    const a1 = values[a + 1];
    s10 += a1 * b0; s11 += a1 * b1; s12 += a1 * b2; s13 += a1 * b3;
    const a2 = values[a + 2];
    s20 += a2 * b0; s21 += a2 * b1; s22 += a2 * b2; s23 += a2 * b3;
    const a3 = values[a + 3];
    s30 += a3 * b0; s31 += a3 * b1; s32 += a3 * b2; s33 += a3 * b3;
  }
  let { to } = of;
  out[to] -= s00; out[to + 1] -= s01; out[to + 2] -= s02; out[to + 3] -= s03;
  to += width;
  out[to] -= s10; out[to + 1] -= s11; out[to + 2] -= s12; out[to + 3] -= s13;
  to += width;
  out[to] -= s20; out[to + 1] -= s21; out[to + 2] -= s22; out[to + 3] -= s23;
  to += width;
  out[to] -= s30; out[to + 1] -= s31; out[to + 2] -= s32; out[to + 3] -= s33;
}

/**
 * out = left x right', every row of one times every row of the other; right may be a symmetric matrix. O(rows x rows x width).
 *
 * @param left row-major count x width. right likewise, of the same width. Neither is changed.
 * @param out receives left.count x right.count. Must be neither of them.
 * @param lowerOnly whether the product is known to be symmetric: only its lower triangle (and some entries above it) is written.
 * @example rowProducts({ values: Float64Array.of(1, 2), count: 1, width: 2 }, { values: Float64Array.of(3, 4), count: 1, width: 2 }, out); // 11
 */
export function rowProducts(left: Block, right: Block, out: Float64Array, lowerOnly = false): void {
  const { width } = left;
  const rows = left.count - (left.count % 4);
  const columns = right.count - (right.count % 4);
  for (let row = 0; row < rows; row += 4) {
    const end = lowerOnly ? Math.min(columns, row + 4) : columns;
    for (let column = 0; column < end; column += 4) productTile(left, right, { row, column }, out);
  }
  for (let row = 0; row < left.count; row++) {
    const end = lowerOnly ? Math.min(right.count, row + 1) : right.count;
    for (let column = row < rows ? columns : 0; column < end; column++) {
      let sum = 0;
      for (let k = 0; k < width; k++) sum += left.values[row * width + k] * right.values[column * width + k];
      out[row * right.count + column] = sum;
    }
  }
}

function productTile(left: Block, right: Block, at: { row: number; column: number }, out: Float64Array): void {
  const { values: u, width } = left;
  const { values: v } = right;
  let s00 = 0, s01 = 0, s02 = 0, s03 = 0, s10 = 0, s11 = 0, s12 = 0, s13 = 0;
  let s20 = 0, s21 = 0, s22 = 0, s23 = 0, s30 = 0, s31 = 0, s32 = 0, s33 = 0;
  const u0 = at.row * width;
  const u1 = u0 + width;
  const u2 = u1 + width;
  const u3 = u2 + width;
  const v0 = at.column * width;
  const v1 = v0 + width;
  const v2 = v1 + width;
  const v3 = v2 + width;
  for (let k = 0; k < width; k++) {
    const b0 = v[v0 + k];
    const b1 = v[v1 + k];
    const b2 = v[v2 + k];
    const b3 = v[v3 + k];
    const a0 = u[u0 + k];
    s00 += a0 * b0; s01 += a0 * b1; s02 += a0 * b2; s03 += a0 * b3;
    const a1 = u[u1 + k];
    s10 += a1 * b0; s11 += a1 * b1; s12 += a1 * b2; s13 += a1 * b3;
    const a2 = u[u2 + k];
    s20 += a2 * b0; s21 += a2 * b1; s22 += a2 * b2; s23 += a2 * b3;
    const a3 = u[u3 + k];
    s30 += a3 * b0; s31 += a3 * b1; s32 += a3 * b2; s33 += a3 * b3;
  }
  let to = at.row * right.count + at.column;
  out[to] = s00; out[to + 1] = s01; out[to + 2] = s02; out[to + 3] = s03;
  to += right.count;
  out[to] = s10; out[to + 1] = s11; out[to + 2] = s12; out[to + 3] = s13;
  to += right.count;
  out[to] = s20; out[to + 1] = s21; out[to + 2] = s22; out[to + 3] = s23;
  to += right.count;
  out[to] = s30; out[to + 1] = s31; out[to + 2] = s32; out[to + 3] = s33;
}
