import type { Posterior } from "./posterior";
import type { PlacedPenalty } from "./term-places";

/** db/drho_j = -C S_j b over all coordinates, with the right-hand side -S_j b that it solves for. */
export type Slope = { shared: Float64Array; grouped: Float64Array; sharedRight: Float64Array; groupedRight: Float64Array };

/**
 * How the estimates move with the logarithm of one penalty, working weights fixed.
 * Source: Wood, Pya & Saefken (2016), section 4.
 *
 * @returns O(size^2 + groups x group size x size).
 * @example penaltySlope(posterior, posterior.penalties[0]).shared;
 */
export function penaltySlope({ information, size, covariance, groups }: Posterior, penalty: PlacedPenalty): Slope {
  const width = groups?.size ?? 0;
  const lines = (groups?.count ?? 0) * width;
  const slope: Slope = {
    shared: new Float64Array(size), grouped: new Float64Array(lines), sharedRight: new Float64Array(size), groupedRight: new Float64Array(lines),
  };
  penalty.positions.forEach((position, k) => {
    const weight = -penalty.multiplier * penalty.diagonal[k];
    if (!penalty.isGrouped) slope.sharedRight[position] = weight * information.coordinates[position];
    else for (let line = position; line < lines; line += width) slope.groupedRight[line] = weight * (information.groups?.coordinates[line] ?? 0);
  });
  const right = slope.sharedRight.slice();
  for (let line = 0; line < lines; line++) for (let k = 0; k < size; k++) right[k] -= (groups?.link[line * size + k] ?? 0) * slope.groupedRight[line];
  for (let row = 0; row < size; row++) for (let k = 0; k < size; k++) slope.shared[row] += covariance[row * size + k] * right[k];
  for (let line = 0; line < lines; line++) {
    const start = line - (line % width);
    let sum = 0;
    for (let k = 0; k < width; k++) sum += (groups?.own[line * width + k] ?? 0) * slope.groupedRight[start + k];
    for (let k = 0; k < size; k++) sum -= (groups?.link[line * size + k] ?? 0) * slope.shared[k];
    slope.grouped[line] = sum;
  }
  return slope;
}

/**
 * J_j' X'WX J_k = J_j' (right side of J_k) - J_j' S J_k.
 *
 * @example slopeProduct(posterior, slope, slope) / model.dispersion;
 */
export function slopeProduct({ shared, grouped }: Posterior, left: Slope, right: Slope): number {
  let sum = 0;
  for (let k = 0; k < shared.length; k++) sum += left.shared[k] * (right.sharedRight[k] - shared[k] * right.shared[k]);
  for (let line = 0; line < left.grouped.length; line++) {
    sum += left.grouped[line] * (right.groupedRight[line] - grouped[line % grouped.length] * right.grouped[line]);
  }
  return sum;
}
