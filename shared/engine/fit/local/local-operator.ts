import { localRows } from "../../basis/local-rows";
import type { LocalRegressionBasis } from "../../types";

/** A local regression under given weights, and the matrix that turns pooled values into its centred curve. */
export type LocalOperator = {
  basis: LocalRegressionBasis;
  /** Row-major count x count: F less its mean over the rows, F - 1c'. */
  centred: Float64Array;
};

/**
 * The linear operator of a local regression at its distinct points, under the working weights: each point's kernel weight
 * is multiplied by the total weight of its rows, and the curve is taken less its plain mean over the rows.
 *
 * @param weights total weight of the rows at each distinct point, above zero. Kept by the basis.
 * Cost: O(points^2).
 * @example localOperator(basis, basis.rows).centred; // of plain rows
 */
export function localOperator(learnt: LocalRegressionBasis, weights: Float64Array): LocalOperator {
  const weighted = { ...learnt, weights };
  const { values, width } = localRows(weighted, learnt.at);
  const centring = new Float64Array(width);
  const total = learnt.rows.reduce((sum, count) => sum + count, 0);
  for (let point = 0; point < width; point++) {
    const share = learnt.rows[point] / total;
    for (let k = 0; k < width; k++) centring[k] += share * values[point * width + k];
  }
  for (let point = 0; point < width; point++) {
    for (let k = 0; k < width; k++) values[point * width + k] -= centring[k];
  }
  return { basis: { ...weighted, centring }, centred: values };
}
