import type { Arrow } from "./arrow-root";
import type { Posterior } from "./posterior";

const emptyLike = ({ own, cross, shared }: Arrow): Arrow =>
  ({ own: new Float64Array(own.length), cross: new Float64Array(cross.length), shared: new Float64Array(shared.length) });

/**
 * Lower triangle with the diagonal halved; with groups first, `cross` (their meeting with later rows) is all of it lower.
 *
 * @param size of the shared block; width of a group's.
 * @example lowerHalf(conjugated, posterior.size, 0).shared; // zero above the diagonal
 */
export function lowerHalf({ own, cross, shared }: Arrow, size: number, width: number): Arrow {
  const cut = (matrix: Float64Array, columns: number) => matrix.map((value, at) => {
    const column = at % columns;
    const row = Math.floor(at / columns) % columns;
    return column < row ? value : column === row ? value / 2 : 0;
  });
  return { own: width === 0 ? own : cut(own, width), cross, shared: cut(shared, size) };
}

/**
 * B'X'WXB = I - sum_j B'S_jB, zero for dropped coordinates.
 *
 * @param conjugated B'S_jB of every penalty, at least one.
 * @example remainder(posterior, posterior.penalties.map((penalty) => conjugatedPenalty(posterior, root, penalty)));
 */
export function remainder({ size, grouped, information }: Posterior, conjugated: readonly Arrow[]): Arrow {
  const first = conjugated[0];
  const out = emptyLike(first);
  for (let k = 0; k < size; k++) out.shared[k * size + k] = 1;
  for (const position of information.dropped) out.shared[position * size + position] = 0;
  for (let row = 0; row * grouped.length < out.own.length; row++) out.own[row * grouped.length + (row % grouped.length)] = 1;
  for (const { own, cross, shared } of conjugated) {
    for (let at = 0; at < own.length; at++) out.own[at] -= own[at];
    for (let at = 0; at < cross.length; at++) out.cross[at] -= cross[at];
    for (let at = 0; at < shared.length; at++) out.shared[at] -= shared[at];
  }
  return out;
}

/**
 * (lower half) x (symmetric), only the entries that meet another lower half's: own, cross (as the shared rows hold it) and
 * shared. O(size^3 + groups x group size x size^2).
 *
 * @example timesSymmetric(half, kept, posterior.size, 0).shared;
 */
export function timesSymmetric(half: Arrow, kept: Arrow, size: number, width: number): Arrow {
  const out = emptyLike(half);
  for (let row = 0; row < size; row++) {
    for (let k = 0; k <= row; k++) {
      const value = half.shared[row * size + k];
      if (value === 0) continue;
      for (let column = 0; column < size; column++) out.shared[row * size + column] += value * kept.shared[k * size + column];
      for (let line = 0; line * size < kept.cross.length; line++) out.cross[line * size + row] += value * kept.cross[line * size + k];
    }
  }
  addGroupRows(half, kept, out, { size, width });
  return out;
}

/** What the groups' columns of the shared rows add, and the groups' own rows. */
function addGroupRows(half: Arrow, kept: Arrow, out: Arrow, { size, width }: { size: number; width: number }): void {
  for (let line = 0; line * size < half.cross.length; line++) {
    const start = line - (line % width);
    for (let row = 0; row < size; row++) {
      const value = half.cross[line * size + row];
      if (value === 0) continue;
      for (let column = 0; column < size; column++) out.shared[row * size + column] += value * kept.cross[line * size + column];
      for (let k = 0; k < width; k++) out.cross[(start + k) * size + row] += value * kept.own[line * width + k];
    }
    for (let k = 0; k < width; k++) {
      const value = half.own[line * width + k];
      for (let column = 0; column < width; column++) out.own[line * width + column] += value * kept.own[(start + k) * width + column];
    }
  }
}

/**
 * Sum of the products of entries: tr(left right') for what both hold.
 *
 * @example entryProduct(half, half); // its sum of squares
 */
export function entryProduct(left: Arrow, right: Arrow): number {
  let sum = 0;
  for (let at = 0; at < left.own.length; at++) sum += left.own[at] * right.own[at];
  for (let at = 0; at < left.cross.length; at++) sum += left.cross[at] * right.cross[at];
  for (let at = 0; at < left.shared.length; at++) sum += left.shared[at] * right.shared[at];
  return sum;
}
