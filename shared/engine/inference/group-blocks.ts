import { addScaled } from "./posterior";
import type { Posterior } from "./posterior";
import { product, sharedPenaltyShare } from "./penalty-share";
import type { Diagonals } from "./penalty-share";

/** C and C S' C of a set of coordinates, row-major. */
export type CoordinateBlocks = { covariance: Float64Array; penaltyShare: Float64Array };

/**
 * C and C S' C of some shared coordinates. O(size^3).
 *
 * @example sharedBlocks(posterior, positions, posterior).covariance[0];
 */
export function sharedBlocks(posterior: Posterior, positions: readonly number[], penalty: Diagonals): CoordinateBlocks {
  const share = sharedPenaltyShare(posterior, penalty);
  return { covariance: block(posterior.covariance, posterior.size, positions), penaltyShare: block(share, posterior.size, positions) };
}

/** The rows and columns of a row-major size x size matrix at `positions`. */
export function block(matrix: Float64Array, size: number, positions: readonly number[]): Float64Array {
  const width = positions.length;
  const out = new Float64Array(width * width);
  for (let row = 0; row < width; row++) {
    for (let column = 0; column < width; column++) out[row * width + column] = matrix[positions[row] * size + positions[column]];
  }
  return out;
}

/**
 * C and C S' C of some coordinates of every group, group by group: with P = (C S' C) among the shared,
 * (C S' C)_gh = K_g P K_h' + [g = h] own_g S' own_g + own_g S' (K_g C K_h') + (K_g C K_h') S' own_h.
 *
 * @param positions within a group's block. O((groups x group size)^2 x size): for few groups.
 * @example groupedBlocks(posterior, [0], posterior).covariance.length; // groups x groups
 */
export function groupedBlocks(posterior: Posterior, positions: readonly number[], penalty: Diagonals): CoordinateBlocks {
  const { groups, size } = posterior;
  if (groups === null) return { covariance: new Float64Array(0), penaltyShare: new Float64Array(0) };
  const total = groups.count * groups.size;
  const between = linked(groups.link, posterior.covariance, total, size);
  const share = linked(groups.link, sharedPenaltyShare(posterior, penalty), total, size);
  const own = blockDiagonal(groups);
  const scaled = own.slice();
  for (let at = 0; at < scaled.length; at++) scaled[at] *= penalty.grouped[(at % total) % groups.size];
  const once = product(scaled, between, total);
  const twice = product(scaled, own, total);
  const kept = Array.from({ length: groups.count }, (_, group) => positions.map((k) => group * groups.size + k)).flat();
  for (let row = 0; row < total; row++) {
    for (let column = 0; column < total; column++) {
      share[row * total + column] += twice[row * total + column] + once[row * total + column] + once[column * total + row];
      own[row * total + column] += between[row * total + column];
    }
  }
  return { covariance: block(own, total, kept), penaltyShare: block(share, total, kept) };
}

/** K matrix K' over all groups' rows of K. */
function linked(link: Float64Array, matrix: Float64Array, rows: number, size: number): Float64Array {
  const out = new Float64Array(rows * rows);
  const half = new Float64Array(size);
  for (let row = 0; row < rows; row++) {
    half.fill(0);
    for (let k = 0; k < size; k++) addScaled(half, 0, matrix, k * size, size, link[row * size + k]);
    for (let other = 0; other < rows; other++) {
      let sum = 0;
      for (let k = 0; k < size; k++) sum += half[k] * link[other * size + k];
      out[row * rows + other] = sum;
    }
  }
  return out;
}

function blockDiagonal({ count, size, own }: NonNullable<Posterior["groups"]>): Float64Array {
  const total = count * size;
  const out = new Float64Array(total * total);
  for (let row = 0; row < total; row++) {
    const group = Math.floor(row / size);
    out.set(own.subarray(row * size, (row + 1) * size), row * total + group * size);
  }
  return out;
}
