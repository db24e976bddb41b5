import { choleskyInPlace } from "../linalg/cholesky";
import { transposed } from "../linalg/dense-product";
import { addScaled } from "./posterior";
import type { Posterior } from "./posterior";
import type { PlacedPenalty } from "./term-places";
import type { CoordinateBasis } from "./spline-basis";
import { product } from "./penalty-share";

/**
 * A matrix over all coordinates, the groups' first: per group its own block (`own`, count x width x width) and its meeting
 * with the shared coordinates (`cross`, count x width x size), and `shared` (size x size). Blocks between two groups are zero.
 */
export type Arrow = { own: Float64Array; cross: Float64Array; shared: Float64Array };

/**
 * Root B of the posterior covariance, B B' = (X'WX + S)^-1: the inverse transpose of the Cholesky factor taken with the
 * groups' coordinates first, then the shared ones in the basis given. O(size^3 + groups x group size x size^2).
 *
 * @param basis the shared coordinates' basis in which the factor is triangular, as `splineBasis` gives.
 * @returns null where the covariance is singular but for dropped coordinates.
 * @example arrowRoot(posterior, splineBasis(posterior, places))?.shared;
 */
export function arrowRoot(posterior: Posterior, basis: CoordinateBasis): Arrow | null {
  const { size, groups } = posterior;
  const shared = sharedRoot(posterior, basis);
  if (shared === null) return null;
  if (groups === null) return { own: new Float64Array(0), cross: new Float64Array(0), shared };
  const { count, size: width, link } = groups;
  const own = new Float64Array(count * width * width);
  const cross = new Float64Array(count * width * size);
  for (let group = 0; group < count; group++) {
    const factor = groups.own.slice(group * width * width, (group + 1) * width * width);
    if (!reversedRoot(factor, width)) return null;
    own.set(factor, group * width * width);
  }
  for (let row = 0; row < count * width; row++) {
    for (let k = 0; k < size; k++) addScaled(cross, row * size, shared, k * size, size, -link[row * size + k]);
  }
  return { own, cross, shared };
}

/** With a = A c the covariance of c is A^-1 C A^-T; its triangular root R gives B = A R. */
function sharedRoot({ covariance, size, information }: Posterior, { forwards, backwards }: CoordinateBasis): Float64Array | null {
  const whole = covariance.slice();
  for (const position of information.dropped) whole[position * size + position] = 1;
  const turned = product(product(backwards, whole, size), transposed(backwards, size, size), size);
  if (!reversedRoot(turned, size)) return null;
  const root = product(forwards, turned, size);
  for (const position of information.dropped) root.fill(0, position * size, (position + 1) * size);
  return root;
}

/** Replaces a covariance C by the upper triangular B with B B' = C: Cholesky's factor of C with its order reversed. */
function reversedRoot(matrix: Float64Array, size: number): boolean {
  const reversed = new Float64Array(size * size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) reversed[row * size + column] = matrix[(size - 1 - row) * size + (size - 1 - column)];
  }
  if (!choleskyInPlace(reversed, size)) return false;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      matrix[row * size + column] = column < row ? 0 : reversed[(size - 1 - row) * size + (size - 1 - column)];
    }
  }
  return true;
}

/**
 * B' D B for the diagonal D of one penalty, multiplier included.
 *
 * @param root as `arrowRoot` gives. O(entries x size^2), groups times.
 * @example conjugatedPenalty(posterior, root, posterior.penalties[0]).shared;
 */
export function conjugatedPenalty(posterior: Posterior, root: Arrow, penalty: PlacedPenalty): Arrow {
  const { size, groups } = posterior;
  const { positions, diagonal, multiplier, isGrouped } = penalty;
  const out: Arrow = { own: new Float64Array(root.own.length), cross: new Float64Array(root.cross.length), shared: new Float64Array(size * size) };
  for (let k = 0; k < positions.length; k++) {
    const weight = multiplier * diagonal[k];
    if (!isGrouped) {
      addOuter(out.shared, root.shared, positions[k], size, weight);
      continue;
    }
    const width = groups?.size ?? 0;
    for (let group = 0; group < (groups?.count ?? 0); group++) {
      const row = group * width + positions[k];
      addOuter(out.shared, root.cross, row, size, weight);
      for (let i = 0; i < width; i++) {
        const own = weight * root.own[row * width + i];
        addScaled(out.own, (group * width + i) * width, root.own, row * width, width, own);
        addScaled(out.cross, (group * width + i) * size, root.cross, row * size, size, own);
      }
    }
  }
  return out;
}

/** out += weight x r r' with r row `row` of a matrix of `size` columns. */
function addOuter(out: Float64Array, matrix: Float64Array, row: number, size: number, weight: number): void {
  for (let k = 0; k < size; k++) addScaled(out, k * size, matrix, row * size, size, weight * matrix[row * size + k]);
}
