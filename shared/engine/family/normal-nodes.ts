import { EigenvalueDecomposition, Matrix } from "ml-matrix";

/** Gauss-Hermite rule for the standard normal: sum of weight x f(node) is the expectation of f. */
export type NormalRule = { nodes: Float64Array; weights: Float64Array };

const known = new Map<number, NormalRule>();

/**
 * Rule of `count` nodes, exact for polynomials up to degree 2 count - 1; found once per count and kept.
 * Source: Golub & Welsch (1969), Math. Comp. 23, 221-230.
 *
 * @example normalRule(15).weights.reduce((sum, weight) => sum + weight, 0); // 1
 */
export function normalRule(count: number): NormalRule {
  let rule = known.get(count);
  if (rule === undefined) {
    rule = golubWelsch(count);
    known.set(count, rule);
  }
  return rule;
}

function golubWelsch(count: number): NormalRule {
  const jacobi = Matrix.zeros(count, count);
  for (let k = 1; k < count; k++) {
    jacobi.set(k, k - 1, Math.sqrt(k));
    jacobi.set(k - 1, k, Math.sqrt(k));
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(jacobi, { assumeSymmetric: true });
  return {
    nodes: Float64Array.from(realEigenvalues),
    weights: Float64Array.from(realEigenvalues, (_node, k) => eigenvectorMatrix.get(0, k) ** 2),
  };
}
