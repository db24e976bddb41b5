import { crossEntries, crossTensor } from "./cross-entries";
import { crossAlike } from "./cross-alike";
import { crossKernel } from "./cross-kernels";
import { paddedWidth } from "./sparse-rows";
import type { GroupedRows, SparseRows } from "./sparse-rows";

export { groupSquare } from "./group-square";

/** Order in which pairs are written, so that each pair needs one kernel. */
const rank = { single: 0, index: 1, spline: 2, dense: 3, tensor: 4 } as const;

/** Whether `crossProduct` wants its two terms the other way round. */
export const isSwapped = (left: SparseRows, right: SparseRows): boolean => rank[left.storage] > rank[right.storage];

/**
 * Weighted cross-product X_left' diag(weights) X_right of two terms, by a kernel for the pair of storages: n x 16
 * additions for two splines, 4 for a spline and an index, 1 for two indices; dense and tensor rows entry by entry.
 *
 * @param left must not rank after `right` in the order single, index, spline, dense, tensor (see `isSwapped`).
 * @param weights length n. Not changed.
 * @param out receives left.width x right.width values, row-major, at its start; must hold the padded widths. Overwritten.
 * @example crossProduct(ones, spline, weights, out); // out: sums of weights under each spline
 */
export function crossProduct(left: SparseRows, right: SparseRows, weights: Float64Array, out: Float64Array): void {
  out.fill(0, 0, paddedWidth(left) * paddedWidth(right));
  if (right.storage === "tensor" && !right.left.wraps && !right.right.wraps) {
    crossTensor(left, right, weights, out);
    return;
  }
  if (isGeneral(left) || isGeneral(right)) {
    crossEntries(asOneGroup(left), asOneGroup(right), weights, out);
    return;
  }
  const scaled = withValues(right, withValues(left, weights));
  if (!crossAlike(left, right, scaled, out)) crossKernel(left, right, scaled, out);
  closeCircles(left, right, out);
}

const asOneGroup = (rows: SparseRows): GroupedRows => ({ rows, width: rows.width });

const isGeneral = (rows: SparseRows): rows is Extract<SparseRows, { storage: "dense" | "tensor" }> =>
  rows.storage === "dense" || rows.storage === "tensor";

/** An index with values is one without, its values among the weights: the inner loops stay those of plain indices. */
function withValues(rows: SparseRows, weights: Float64Array): Float64Array {
  if (rows.storage !== "index" || rows.values === null) return weights;
  const { values } = rows;
  const scaled = new Float64Array(weights.length);
  for (let row = 0; row < scaled.length; row++) scaled[row] = weights[row] * values[row];
  return scaled;
}

/** Adds the three padded rows and columns of a circle to the ones they stand for, and closes the gaps in `out`. */
function closeCircles(left: SparseRows, right: SparseRows, out: Float64Array): void {
  const stride = paddedWidth(right);
  const leftPadded = paddedWidth(left);
  for (let row = left.width; row < leftPadded; row++) {
    const to = (row - left.width) * stride;
    for (let column = 0; column < stride; column++) out[to + column] += out[row * stride + column];
  }
  if (stride === right.width) return;
  const { width } = right;
  for (let row = 0; row < left.width; row++) {
    const from = row * stride;
    const to = row * width;
    for (let column = 0; column < width; column++) {
      const value = out[from + column];
      out[to + column] = column < 3 ? value + out[from + width + column] : value;
    }
  }
}
