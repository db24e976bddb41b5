import { denseProduct } from "../linalg/dense-product";
import { addScaled } from "./posterior";
import type { Posterior } from "./posterior";

/** A diagonal penalty over the shared coordinates and over one group's. */
export type Diagonals = { shared: Float64Array; grouped: Float64Array };

/**
 * (C S C) among the shared coordinates, with C the posterior's covariance and S a diagonal penalty over all coordinates, the
 * groups' too: C (S_shared + sum_g K_g' S_g K_g) C.
 *
 * @returns row-major size x size. O(size^3 + groups x group size x size^2).
 * @example sharedPenaltyShare(posterior, posterior)[0]; // 0: no penalty reaches the intercept alone
 */
export function sharedPenaltyShare(posterior: Posterior, { shared, grouped }: Diagonals): Float64Array {
  const { size, covariance, groups } = posterior;
  const middle = new Float64Array(size * size);
  for (let k = 0; k < size; k++) middle[k * size + k] = shared[k];
  if (groups !== null) {
    for (let row = 0; row < groups.count * groups.size; row++) {
      const weight = grouped[row % groups.size];
      for (let k = 0; k < size; k++) addScaled(middle, k * size, groups.link, row * size, size, weight * groups.link[row * size + k]);
    }
  }
  return product(product(covariance, middle, size), covariance, size);
}

/** Row-major left x right, all size x size. */
export const product = (left: Float64Array, right: Float64Array, size: number): Float64Array =>
  denseProduct({ values: left, count: size, width: size }, { values: right, count: size, width: size });

/**
 * Per coordinate its share of 2 tr(F) - tr(FF), F = (X'WX + S)^-1 X'WX = I - C S: the degrees of freedom that tests take
 * for a term's rank. As FF's diagonal is 1 - 2 (C S)_ii + S_i (C S C)_ii, the share is 1 - S_i (C S C)_ii.
 * Source: Wood (2013), Biometrika 100, 221-228, section 3; Hastie & Tibshirani (1990), section 3.5 (the second definition).
 *
 * @returns shared: one value per shared coordinate (0 for dropped); grouped: per coordinate of a group, summed over groups.
 * @example rankDegrees(posterior).shared[0]; // 1: the intercept
 */
export function rankDegrees(posterior: Posterior): Diagonals {
  const { size, shared, grouped, groups, information } = posterior;
  const share = sharedPenaltyShare(posterior, posterior);
  const degrees = { shared: shared.map((penalty, k) => 1 - penalty * share[k * size + k]), grouped: new Float64Array(grouped.length) };
  for (const position of information.dropped) degrees.shared[position] = 0;
  if (groups === null) return degrees;
  const width = groups.size;
  for (let group = 0; group < groups.count; group++) {
    const links = groups.link.subarray(group * width * size, (group + 1) * width * size);
    const own = groups.own.subarray(group * width * width, (group + 1) * width * width);
    for (let k = 0; k < width; k++) {
      degrees.grouped[k] += 1 - grouped[k] * groupShare(posterior, { links, own, share }, k);
    }
  }
  return degrees;
}

/** (C S C) at coordinate k of one group. */
function groupShare(
  posterior: Posterior, of: { links: Float64Array; own: Float64Array; share: Float64Array }, k: number,
): number {
  const { size, covariance, grouped } = posterior;
  const width = grouped.length;
  const link = of.links.subarray(k * size, (k + 1) * size);
  let sum = bilinear(link, of.share, link, size);
  for (let l = 0; l < width; l++) {
    const own = of.own[k * width + l];
    const crossed = bilinear(link, covariance, of.links.subarray(l * size, (l + 1) * size), size);
    sum += grouped[l] * own * (own + 2 * crossed);
  }
  return sum;
}

/** left' matrix right for a symmetric row-major matrix. */
export function bilinear(left: Float64Array, matrix: Float64Array, right: Float64Array, size: number): number {
  let total = 0;
  for (let row = 0; row < size; row++) {
    if (left[row] === 0) continue;
    let sum = 0;
    for (let column = 0; column < size; column++) sum += matrix[row * size + column] * right[column];
    total += left[row] * sum;
  }
  return total;
}
