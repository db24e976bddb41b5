import { choleskyInPlace, invertFactored } from "../linalg/cholesky";
import type { FittedModel, ModelInformation } from "../types";
import { placedPenalties } from "./term-places";
import type { PlacedPenalty } from "./term-places";

/**
 * (X'WX + S)^-1 in fitting coordinates, without the dispersion. With groups in block-arrow form: C = `covariance` among the
 * shared, K_g = `link`, cov(g, shared) = -K_g C, cov(g, h) = K_g C K_h' + [g = h] own_g.
 */
export type Posterior = {
  information: ModelInformation;
  penalties: PlacedPenalty[];
  size: number;
  /** Row-major size x size; zero in the rows and columns of dropped coordinates. */
  covariance: Float64Array;
  /** Diagonal of S over the shared coordinates, and over one group's. */
  shared: Float64Array;
  grouped: Float64Array;
  groups: { count: number; size: number; link: Float64Array; own: Float64Array } | null;
};

/**
 * The posterior covariance of a fitted model's coordinates, from its information and penalties.
 * Source: Wahba (1983), J. R. Statist. Soc. B 45, 133-150; partitioned inverse: Golub & Van Loan (1996), section 3.2.
 *
 * @returns null where the penalised system is singular to rounding. O(size^3 + groups x group size x size^2).
 * @example posteriorOf(model, information)?.covariance[0]; // variance of the intercept over the dispersion
 */
export function posteriorOf(model: FittedModel, information: ModelInformation): Posterior | null {
  const { size } = information;
  const penalties = placedPenalties(model);
  const shared = new Float64Array(size);
  const grouped = new Float64Array(information.groups?.size ?? 0);
  for (const { isGrouped, positions, diagonal, multiplier } of penalties) {
    const into = isGrouped ? grouped : shared;
    for (let k = 0; k < positions.length; k++) into[positions[k]] += multiplier * diagonal[k];
  }
  const schur = unpacked(information.shared, size);
  for (let k = 0; k < size; k++) schur[k * size + k] += shared[k];
  const groups = eliminateGroups(information, grouped, schur);
  if (groups === "singular") return null;
  for (const position of information.dropped) isolate(schur, size, position, 1);
  if (!choleskyInPlace(schur, size)) return null;
  const covariance = new Float64Array(size * size);
  invertFactored(schur, size, covariance);
  for (const position of information.dropped) isolate(covariance, size, position, 0);
  return { information, penalties, size, covariance, shared, grouped, groups };
}

/** Row-major square matrix of a packed lower triangle, both triangles. */
export function unpacked(packed: Float64Array, size: number, from = 0): Float64Array {
  const matrix = new Float64Array(size * size);
  let at = from;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column <= row; column++) {
      matrix[row * size + column] = packed[at];
      matrix[column * size + row] = packed[at++];
    }
  }
  return matrix;
}

/** Row and column to zero, with `diagonal` where they meet. */
function isolate(matrix: Float64Array, size: number, position: number, diagonal: number): void {
  for (let k = 0; k < size; k++) {
    matrix[position * size + k] = 0;
    matrix[k * size + position] = 0;
  }
  matrix[position * size + position] = diagonal;
}

/** Takes every group's part from `schur`: own_g = (X_g'WX_g + S_g)^-1, K_g = own_g X_g'WX_shared. */
function eliminateGroups(
  { groups, size, dropped }: ModelInformation, grouped: Float64Array, schur: Float64Array,
): Posterior["groups"] | "singular" {
  if (groups === null) return null;
  const width = groups.size;
  const link = new Float64Array(groups.count * width * size);
  const own = new Float64Array(groups.count * width * width);
  const packed = (width * (width + 1)) / 2;
  for (let group = 0; group < groups.count; group++) {
    const block = unpacked(groups.own, width, group * packed);
    for (let k = 0; k < width; k++) block[k * width + k] += grouped[k];
    if (!choleskyInPlace(block, width)) return "singular";
    const inverse = own.subarray(group * width * width, (group + 1) * width * width);
    invertFactored(block, width, inverse);
    const cross = groups.cross.subarray(group * width * size, (group + 1) * width * size);
    const links = link.subarray(group * width * size, (group + 1) * width * size);
    for (let row = 0; row < width; row++) {
      for (let k = 0; k < width; k++) addScaled(links, row * size, cross, k * size, size, inverse[row * width + k]);
      for (const position of dropped) links[row * size + position] = 0;
    }
    for (let k = 0; k < width; k++) {
      for (let row = 0; row < size; row++) addScaled(schur, row * size, links, k * size, size, -cross[k * size + row]);
    }
  }
  return { count: groups.count, size: width, link, own };
}

/** to[toAt ...] += factor x from[fromAt ...], `count` values. */
export function addScaled(
  to: Float64Array, toAt: number, from: Float64Array, fromAt: number, count: number, factor: number,
): void {
  if (factor === 0) return;
  for (let k = 0; k < count; k++) to[toAt + k] += factor * from[fromAt + k];
}
