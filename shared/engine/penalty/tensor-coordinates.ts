import { EigenvalueDecomposition, Matrix, solve } from "ml-matrix";
import { evenlySpaced, gridRowsAt } from "../basis/spline-grid";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { SmoothBasis, TensorProductBasis } from "../types";
import type { TermCoordinates } from "./coordinates";
import { differencePenalty } from "./difference-penalty";

/** A margin's coefficients = matrix x coordinates, in which its penalty is diagonal, the first entry zero (its line). */
type Margin = { matrix: Matrix; diagonal: Float64Array };

/**
 * Coordinates of a tensor product without main effects. Each margin, centred over the rows, is parametrised by its values at
 * size - 1 evenly spaced points over its observed range, and turned by the eigenvectors of its penalty there: the joint
 * penalties, margin 1's x identity and identity x margin 2's, are then diagonal both. Line times line, which neither
 * penalises, comes first.
 * Source: Wood (2006), Biometrics 62, sections 2.1 and 2.3.
 *
 * @example tensorCoordinates(basis).penalised; // 15 for sizes 5 and 5
 */
export function tensorCoordinates({ margins, ranges }: TensorProductBasis): TermCoordinates {
  const [left, right] = margins.map((margin, k) => marginOf(margin, ranges[k]));
  const pairs = Array.from(left.diagonal, (_, i) => Array.from(right.diagonal, (__, j): [number, number] => [i, j])).flat();
  const width = pairs.length;
  const secondSize = margins[1].size;
  const rawWidth = margins[0].size * secondSize;
  const matrix = new Float64Array(rawWidth * width);
  for (let raw = 0; raw < rawWidth; raw++) {
    const a = Math.floor(raw / secondSize);
    const b = raw % secondSize;
    for (let k = 0; k < width; k++) matrix[raw * width + k] = left.matrix.get(a, pairs[k][0]) * right.matrix.get(b, pairs[k][1]);
  }
  const penalised = pairs.slice(1);
  return {
    transform: { form: "dense", matrix },
    rawWidth,
    unpenalised: 1,
    penalised: penalised.length,
    penalties: [
      { start: 0, end: penalised.length, diagonal: Float64Array.from(penalised, ([i]) => left.diagonal[i]) },
      { start: 0, end: penalised.length, diagonal: Float64Array.from(penalised, ([, j]) => right.diagonal[j]) },
    ],
    grouped: false,
  };
}

function marginOf(basis: SmoothBasis, range: readonly [number, number]): Margin {
  const { size } = basis;
  const byValues = coefficientsByValues(basis, range);
  const penalty = byValues.transpose().mmul(Matrix.from1DArray(size, size, differencePenalty(size, false))).mmul(byValues);
  const decomposition = new EigenvalueDecomposition(penalty, { assumeSymmetric: true });
  const diagonal = Float64Array.from(decomposition.realEigenvalues);
  // The centred line has no second differences: what is left of its eigenvalue is rounding.
  diagonal[0] = 0;
  return { matrix: byValues.mmul(decomposition.eigenvectorMatrix), diagonal };
}

/** The coefficients whose curve is 1 at one of the points, 0 at the others and 0 on average over the rows: one column each. */
function coefficientsByValues(basis: SmoothBasis, range: readonly [number, number]): Matrix {
  const { size, centring } = basis;
  const rows = gridRowsAt(basis, evenlySpaced(range, size - 1));
  const conditions = Matrix.zeros(size, size);
  const unit = new Float64Array(size);
  const values = new Float64Array(size - 1);
  for (let column = 0; column < size; column++) {
    unit.fill(0);
    values.fill(0);
    unit[column] = 1;
    addRowsTimes(rows, unit, 0, values);
    for (let point = 0; point < size - 1; point++) conditions.set(point, column, values[point]);
    conditions.set(size - 1, column, centring[column]);
  }
  return solve(conditions, Matrix.eye(size, size - 1));
}
