import { EigenvalueDecomposition, Matrix, SingularValueDecomposition, solve } from "ml-matrix";
import { evenlySpaced, gridRowsAt } from "../basis/spline-grid";
import { orthonormalComplement } from "../linalg/orthonormal-complement";
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
  const frame = centredFrame(basis, range);
  const penalty = frame.transpose().mmul(Matrix.from1DArray(size, size, differencePenalty(size, false))).mmul(frame);
  const decomposition = new EigenvalueDecomposition(penalty, { assumeSymmetric: true });
  const diagonal = Float64Array.from(decomposition.realEigenvalues);
  // The centred line has no second differences: what is left of its eigenvalue is rounding.
  diagonal[0] = 0;
  return { matrix: frame.mmul(decomposition.eigenvectorMatrix), diagonal };
}

/** Share of the largest singular value below which values at the points do not tell the centred curves apart. */
const leastShare = 1e-6;

/**
 * Coefficients of curves that are 0 on average over the rows: each column's is 1 at one of the points and 0 at the others.
 * Where all rows lie at the points, or almost all at one end, the mean is a combination of those values and no such curves
 * exist; then any orthonormal set.
 */
function centredFrame(basis: SmoothBasis, range: readonly [number, number]): Matrix {
  const { size, centring } = basis;
  const length = Math.hypot(...centring);
  const complement = orthonormalComplement([centring.map((value) => value / length)], size);
  const frame = Matrix.from1DArray(size, size - 1, complement);
  const rows = gridRowsAt(basis, evenlySpaced(range, size - 1));
  const values = Matrix.zeros(size - 1, size - 1);
  for (let column = 0; column < size - 1; column++) {
    const atPoints = new Float64Array(size - 1);
    addRowsTimes(rows, Float64Array.from(frame.getColumn(column)), 0, atPoints);
    values.setColumn(column, atPoints);
  }
  const singular = new SingularValueDecomposition(values).diagonal;
  if (!(Math.min(...singular) > leastShare * Math.max(...singular))) return frame;
  return frame.mmul(solve(values, Matrix.eye(size - 1, size - 1)));
}
