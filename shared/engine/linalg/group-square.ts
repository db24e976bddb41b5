import { crossEntries } from "./cross-entries";
import { crossSplines } from "./cross-kernels";
import type { GroupedRows, IndexRows } from "./sparse-rows";

/**
 * Diagonal blocks X_g'W X_g of two terms on the same groups: only what rows of one group have in common, O(n x 16) for two
 * splines and O(n) for two indices, however many groups there are.
 *
 * @param left its rows are on groups: `width` columns a group, both terms' rows in the same group. right likewise.
 * @param by.count number of groups; by.weights length n. Not changed.
 * @param out receives count x left.width x right.width values. Overwritten.
 * @example groupSquare({ rows: slopes, width: 1 }, { rows: slopes, width: 1 }, { count: 83, weights }, out);
 */
export function groupSquare(
  left: GroupedRows, right: GroupedRows, by: { count: number; weights: Float64Array }, out: Float64Array,
): void {
  const { weights } = by;
  out.fill(0, 0, by.count * left.width * right.width);
  if (left.rows.storage === "spline" && right.rows.storage === "spline") {
    crossSplines({ rows: left.rows, width: left.width }, { rows: right.rows, width: right.width }, weights, out);
  } else if (left.rows.storage === "index" && left.rows === right.rows && left.width === 1) {
    indexSquares(left.rows, weights, out);
  } else {
    crossEntries(left, right, weights, out);
  }
}

/** A column a group: its square is the group's sum of weights (times squared values). */
function indexSquares({ index, values }: IndexRows, weights: Float64Array, out: Float64Array): void {
  if (values === null) for (let row = 0; row < weights.length; row++) out[index[row]] += weights[row];
  else for (let row = 0; row < weights.length; row++) out[index[row]] += weights[row] * values[row] * values[row];
}
