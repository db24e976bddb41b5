import { EigenvalueDecomposition, Matrix } from "ml-matrix";

/**
 * Second-difference penalty D'D on the coefficients of equally spaced B-splines; on a circle differences wrap round.
 * Source: Eilers & Marx (1996), equation 5.
 *
 * @returns row-major size x size; rank size - 2 (null space: straight lines), on a circle size - 1 (constants).
 * @example differencePenalty(4, false).slice(0, 4); // 1, -2, 1, 0
 */
export function differencePenalty(size: number, wraps: boolean): Float64Array {
  const penalty = new Float64Array(size * size);
  const weights = [1, -2, 1];
  const differences = wraps ? size : size - 2;
  for (let start = 0; start < differences; start++) {
    for (let i = 0; i < 3; i++) {
      for (let j = 0; j < 3; j++) penalty[((start + i) % size) * size + ((start + j) % size)] += weights[i] * weights[j];
    }
  }
  return penalty;
}

/** Coefficients = matrix x coordinates: in the coordinates the penalty is zero for the first `unpenalised`, then the identity. */
export type IdentityTransform = {
  /** Row-major, size x (size - 1): the constant is left out, the intercept carries it. */
  matrix: Float64Array;
  unpenalised: number;
  /** Rank of the penalty: number of penalised coordinates. */
  penalised: number;
};

const known = new Map<string, IdentityTransform>();

/**
 * Change of coordinates that turns the difference penalty into the identity and drops the constant: eigenvectors of D'D
 * over the square root of their eigenvalue, and the straight line first (none on a circle). Computed once per size.
 * Source: Wood (2017), Generalized Additive Models (2nd ed.), section 5.4.2.
 *
 * @example identityTransform(10, false); // matrix 10 x 9, unpenalised 1, penalised 8
 */
export function identityTransform(size: number, wraps: boolean): IdentityTransform {
  const key = `${size}${wraps ? " wraps" : ""}`;
  const before = known.get(key);
  if (before !== undefined) return before;
  const computed = computeTransform(size, wraps);
  known.set(key, computed);
  return computed;
}

function computeTransform(size: number, wraps: boolean): IdentityTransform {
  const unpenalised = wraps ? 0 : 1;
  const width = size - 1;
  const decomposition = new EigenvalueDecomposition(
    Matrix.from1DArray(size, size, differencePenalty(size, wraps)),
    { assumeSymmetric: true },
  );
  const matrix = new Float64Array(size * width);
  if (!wraps) {
    for (let row = 0; row < size; row++) matrix[row * width] = row - (size - 1) / 2;
  }
  // Eigenvalues come in ascending order: the null space (constants, and lines off the circle) is first.
  const nullity = unpenalised + 1;
  for (let column = unpenalised; column < width; column++) {
    const from = column - unpenalised + nullity;
    const scale = 1 / Math.sqrt(decomposition.realEigenvalues[from]);
    for (let row = 0; row < size; row++) matrix[row * width + column] = decomposition.eigenvectorMatrix.get(row, from) * scale;
  }
  return { matrix, unpenalised, penalised: width - unpenalised };
}
