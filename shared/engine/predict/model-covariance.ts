import { packedQuadratic, sparseVariance } from "../linalg/packed-symmetric";
import type { FittedModel, GroupCovariance } from "../types";

/** Coefficients of shared terms, which come before those of eliminated groups. */
export const sharedCount = ({ coefficients, groupCovariance }: FittedModel): number =>
  coefficients.length - (groupCovariance === null ? 0 : groupCovariance.count * groupCovariance.size);

/**
 * left' V right with V the coefficients' covariance: a variance where both are the same gradient. O(shared coefficients^2 +
 * groups x shared coefficients).
 *
 * @param left one value per coefficient. right likewise.
 * @example Math.sqrt(covarianceQuadratic(model, gradient, gradient)); // a standard error
 */
export function covarianceQuadratic(model: FittedModel, left: Float64Array, right: Float64Array): number {
  const { covariance, groupCovariance } = model;
  if (groupCovariance === null) return packedQuadratic(covariance, left, right);
  const shared = sharedCount(model);
  const from = { left: left.slice(0, shared), right: right.slice(0, shared) };
  const { count, size } = groupCovariance;
  const own = { left: new Float64Array(size), right: new Float64Array(size) };
  let total = 0;
  for (let group = 0; group < count; group++) {
    const hasLeft = takeGroup(groupCovariance, group, left, own.left);
    const hasRight = takeGroup(groupCovariance, group, right, own.right);
    if (hasLeft) subtractLink(groupCovariance, group, own.left, from.left);
    if (hasRight) subtractLink(groupCovariance, group, own.right, from.right);
    if (hasLeft && hasRight) total += packedQuadratic(ownOf(groupCovariance, group), own.left, own.right);
  }
  return total + packedQuadratic(covariance, from.left, from.right);
}

function takeGroup({ first, step, size }: GroupCovariance, group: number, vector: Float64Array, out: Float64Array): boolean {
  let any = false;
  for (let k = 0; k < size; k++) {
    out[k] = vector[first[k] + group * step[k]];
    any ||= out[k] !== 0;
  }
  return any;
}

/** shared -= L_g' own. */
function subtractLink({ link, size }: GroupCovariance, group: number, own: Float64Array, shared: Float64Array): void {
  for (let k = 0; k < size; k++) {
    if (own[k] === 0) continue;
    const from = (group * size + k) * shared.length;
    for (let column = 0; column < shared.length; column++) shared[column] -= link[from + column] * own[k];
  }
}

const ownOf = ({ own, size }: GroupCovariance, group: number): Float64Array => {
  const length = (size * (size + 1)) / 2;
  return own.subarray(group * length, (group + 1) * length);
};

/** Variance of a sparse combination of coefficients, given as `count` pairs of coefficient index and value. */
export type SparseVariance = (indices: Int32Array, values: Float64Array, count: number) => number;

/**
 * A function for the variances of many sparse rows: what all rows have in common is prepared once.
 * Cost per row: entries^2; with groups, shared coefficients^2.
 *
 * @example sparseVarianceOf(model)(indices, values, count);
 */
export function sparseVarianceOf(model: FittedModel): SparseVariance {
  const { covariance, groupCovariance } = model;
  if (groupCovariance === null) return (indices, values, count) => sparseVariance(covariance, indices, values, count);
  const shared = sharedCount(model);
  const places = groupPlaces(groupCovariance, model.coefficients.length, shared);
  const dense = new Float64Array(shared);
  const own = new Float64Array(groupCovariance.size);
  return (indices, values, count) => {
    dense.fill(0);
    own.fill(0);
    let group = -1;
    for (let k = 0; k < count; k++) {
      const at = indices[k] - shared;
      if (at < 0) dense[indices[k]] += values[k];
      else if (values[k] !== 0) {
        group = places.group[at];
        own[places.own[at]] += values[k];
      }
    }
    if (group < 0) return Math.max(0, packedQuadratic(covariance, dense, dense));
    subtractLink(groupCovariance, group, own, dense);
    return Math.max(0, packedQuadratic(covariance, dense, dense) + packedQuadratic(ownOf(groupCovariance, group), own, own));
  };
}

/** Per coefficient of a group, which group's it is and which of that group's. */
function groupPlaces({ count, size, first, step }: GroupCovariance, all: number, shared: number): { group: Int32Array; own: Int32Array } {
  const places = { group: new Int32Array(all - shared), own: new Int32Array(all - shared) };
  for (let group = 0; group < count; group++) {
    for (let k = 0; k < size; k++) {
      const at = first[k] + group * step[k] - shared;
      places.group[at] = group;
      places.own[at] = k;
    }
  }
  return places;
}
