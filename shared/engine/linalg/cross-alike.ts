import { crossKernel } from "./cross-kernels";
import type { PlainRows } from "./cross-kernels";
import { paddedWidth } from "./sparse-rows";
import type { AlikeRows, IndexRows, SplineRows } from "./sparse-rows";

/**
 * The same product where a spline's rows are alike: weights are summed per distinct row first, as under an index, and only the
 * sums are multiplied by splines.
 *
 * @param left as for `crossKernel`. right likewise.
 * @param out added to.
 * @returns false, and does nothing, where no spline's rows are alike or that would be more work.
 * @example if (!crossAlike(left, right, weights, out)) crossKernel(left, right, weights, out);
 */
export function crossAlike(left: PlainRows, right: PlainRows, weights: Float64Array, out: Float64Array): boolean {
  if (left === right) return squareAlike(left, weights, out);
  const rows = weights.length;
  if (left.storage === "spline") {
    if (left.alike === undefined || !isWorthwhile(left.alike, right, rows)) return false;
    spreadRows(left.alike.rows, sumsPerRow(asIndex(left.alike), right, weights), paddedWidth(right), out);
    return true;
  }
  if (right.storage !== "spline" || right.alike === undefined || !isWorthwhile(right.alike, left, rows)) return false;
  spreadColumns(right.alike.rows, sumsPerRow(left, asIndex(right.alike), weights), { rows: left.width, stride: paddedWidth(right) }, out);
  return true;
}

function squareAlike(own: PlainRows, weights: Float64Array, out: Float64Array): boolean {
  if (own.storage !== "spline" || own.alike === undefined) return false;
  const { codes, rows } = own.alike;
  const sums = new Float64Array(rows.first.length);
  for (let row = 0; row < codes.length; row++) sums[codes[row]] += weights[row];
  crossKernel(rows, rows, sums, out);
  return true;
}

/** Additions to spread the sums, half of which is overhead, against those saved per row. */
const isWorthwhile = ({ rows }: AlikeRows, other: PlainRows, count: number): boolean =>
  8 * rows.first.length * other.width <= count * (other.storage === "spline" ? 12 : 3);

const asIndex = ({ codes, rows }: AlikeRows): IndexRows => ({ storage: "index", width: rows.first.length, index: codes, values: null });

function sumsPerRow(left: PlainRows, right: PlainRows, weights: Float64Array): Float64Array {
  const sums = new Float64Array(paddedWidth(left) * paddedWidth(right));
  crossKernel(left, right, weights, sums);
  return sums;
}

/** out += splines' sums, row-major (distinct rows) x stride. */
function spreadRows({ first, values }: SplineRows, sums: Float64Array, stride: number, out: Float64Array): void {
  for (let row = 0; row < first.length; row++) {
    const from = row * stride;
    for (let k = 0; k < 4; k++) {
      const value = values[4 * row + k];
      const to = (first[row] + k) * stride;
      for (let column = 0; column < stride; column++) out[to + column] += value * sums[from + column];
    }
  }
}

/** out += sums splines, sums row-major `rows` x (distinct rows). */
function spreadColumns({ first, values }: SplineRows, sums: Float64Array, to: { rows: number; stride: number }, out: Float64Array): void {
  const count = first.length;
  for (let row = 0; row < to.rows; row++) {
    for (let own = 0; own < count; own++) {
      const sum = sums[row * count + own];
      if (sum === 0) continue;
      const at = row * to.stride + first[own];
      for (let k = 0; k < 4; k++) out[at + k] += sum * values[4 * own + k];
    }
  }
}
