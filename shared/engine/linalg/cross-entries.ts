import { entriesPerRow, gatherRow, roomForRow } from "./sparse-rows";
import type { GroupedRows, SparseRows, TensorRows } from "./sparse-rows";

/**
 * Diagonal blocks X_g' diag(weights) X_g of any two terms by their rows' entries. O(n x entries x entries).
 *
 * @param left both terms' rows are in the same group. right likewise.
 * @param out added to: left.width x right.width values a group, row-major. A block row (left column) of group g starts at
 * (left column) x right.width, since left columns are group by group.
 * @example crossEntries({ rows: dense, width: dense.width }, { rows: spline, width: spline.width }, weights, out);
 */
export function crossEntries(left: GroupedRows, right: GroupedRows, weights: Float64Array, out: Float64Array): void {
  const own = roomForRow(left.rows);
  const other = roomForRow(right.rows);
  const stride = right.width;
  for (let row = 0; row < weights.length; row++) {
    const rows = gatherRow(left.rows, row, 0, own);
    const columns = gatherRow(right.rows, row, 0, other);
    const group = Math.floor(own.indices[0] / left.width);
    for (let i = 0; i < rows; i++) {
      const scaled = weights[row] * own.values[i];
      const start = (own.indices[i] - group) * stride;
      for (let j = 0; j < columns; j++) out[start + other.indices[j]] += scaled * other.values[j];
    }
  }
}

/**
 * The same with a tensor product of splines off the circle on the right: its 16 values are 4 runs of 4 neighbours.
 *
 * @param out added to: left.width x right.width values, row-major.
 * @example crossTensor(spline, tensor, weights, out);
 */
export function crossTensor(left: SparseRows, { width, left: outer, right: inner }: TensorRows, weights: Float64Array, out: Float64Array): void {
  const own = roomForRow(left);
  const { indices, values } = own;
  const entries = entriesPerRow(left);
  const outerValues = outer.values;
  const innerValues = inner.values;
  const stride = inner.width;
  for (let row = 0; row < weights.length; row++) {
    gatherRow(left, row, 0, own);
    const at = 4 * row;
    const v0 = innerValues[at];
    const v1 = innerValues[at + 1];
    const v2 = innerValues[at + 2];
    const v3 = innerValues[at + 3];
    const first = outer.first[row] * stride + inner.first[row];
    for (let i = 0; i < entries; i++) {
      const weighted = weights[row] * values[i];
      let to = indices[i] * width + first;
      for (let k = 0; k < 4; k++, to += stride) {
        const scaled = weighted * outerValues[at + k];
        out[to] += scaled * v0;
        out[to + 1] += scaled * v1;
        out[to + 2] += scaled * v2;
        out[to + 3] += scaled * v3;
      }
    }
  }
}
