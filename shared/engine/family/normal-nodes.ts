import { EigenvalueDecomposition, Matrix } from "ml-matrix";

const count = 15;

/**
 * Gauss-Hermite nodes and weights for the standard normal: sum of weight x f(node) is the expectation of f, exact for
 * polynomials up to degree 29. Source: Golub & Welsch (1969), Math. Comp. 23, 221-230.
 */
export const normalNodes: readonly { node: number; weight: number }[] = golubWelsch();

function golubWelsch(): { node: number; weight: number }[] {
  const jacobi = Matrix.zeros(count, count);
  for (let k = 1; k < count; k++) {
    jacobi.set(k, k - 1, Math.sqrt(k));
    jacobi.set(k - 1, k, Math.sqrt(k));
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(jacobi, { assumeSymmetric: true });
  return realEigenvalues.map((node, k) => ({ node, weight: eigenvectorMatrix.get(0, k) ** 2 }));
}
