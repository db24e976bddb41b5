import { basisRows } from "../../basis/term-basis";
import { sparseVariance, withoutZeros } from "../../linalg/packed-symmetric";
import { entriesPerRow, gatherRow } from "../../linalg/sparse-rows";
import type { FittedTerm, ModelData } from "../../types";

/**
 * Sum over rows of working weight x variance of the linear predictor: for a linear operator L of the working response
 * tr(LL'), for penalised terms their effective degrees of freedom.
 *
 * @param covariance of the coefficients over the dispersion, packed. Not changed.
 * @param of.data the columns of the fitted rows; of.weights one working weight per row.
 * Cost: O(rows x entries^2), entries of a local regression being the points within its window.
 * @example weightedVariances(terms, perDispersion, { data, weights }); // 4.6
 */
export function weightedVariances(
  terms: readonly FittedTerm[], covariance: Float64Array, of: { data: ModelData; weights: Float64Array },
): number {
  const parts = terms.map((term) => ({ first: term.first, rows: basisRows(term.basis, of.data) }));
  const most = parts.reduce((sum, { rows }) => sum + entriesPerRow(rows), 1);
  const indices = new Int32Array(most);
  const values = new Float64Array(most);
  let total = 0;
  for (let row = 0; row < of.weights.length; row++) {
    values[0] = 1;
    indices[0] = 0;
    let count = 1;
    for (const { first, rows } of parts) count = gatherRow(rows, row, first, { indices, values, count });
    total += of.weights[row] * sparseVariance(covariance, indices, values, withoutZeros(indices, values, count));
  }
  return total;
}
