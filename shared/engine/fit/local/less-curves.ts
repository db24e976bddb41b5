import type { NormalEquations } from "../normal-equations";
import type { PooledDesign } from "./pooled-design";

/**
 * Normal equations of the other terms for the response less the local curves, from the cross-products of all: X'W(z - D g)
 * and (z - D g)'W(z - D g), without another pass over the rows.
 *
 * @param equations of the pooled design. Not changed.
 * @param curves g, per joint unknown of a local regression; zero for coordinates.
 * Cost: O(unknowns^2).
 * @example lessCurves(layout, equations, joint.curves).vector;
 */
export function lessCurves({ fixed, size }: PooledDesign, equations: NormalEquations, curves: Float64Array): NormalEquations {
  const { matrix: cross, shift } = equations;
  const matrix = new Float64Array(fixed * fixed);
  const vector = equations.vector.slice(0, fixed);
  for (let row = 0; row < fixed; row++) matrix.set(cross.subarray(row * size, row * size + row + 1), row * fixed);
  let { total } = equations;
  for (let row = fixed; row < size; row++) {
    const curve = curves[row];
    const from = row * size;
    for (let k = 0; k < fixed; k++) vector[k] -= curve * cross[from + k];
    let others = 0;
    for (let k = fixed; k < row; k++) others += cross[from + k] * curves[k];
    total += curve * (2 * others + cross[from + row] * curve - 2 * equations.vector[row]);
  }
  return { matrix, vector, groups: null, total, shift };
}
