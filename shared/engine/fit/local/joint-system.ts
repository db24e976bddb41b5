import { addProduct, denseProduct } from "../../linalg/dense-product";
import type { DroppedColumn } from "../../linalg/dropping-cholesky";
import type { NormalEquations } from "../normal-equations";
import { localOperator } from "./local-operator";
import type { LocalOperator } from "./local-operator";
import type { LocalPart, PooledDesign } from "./pooled-design";

/**
 * Coefficients b and pooled partial residuals e_l = P_l (z - X b - sum of the other local curves), all at once: the point
 * at which backfitting rests, found exactly. With Z = [X, D_1, ..., D_L], G = Z'WZ and the curves' operators
 * K = diag(I, F_1 - 1c', ...), row i of the system A is that of G K, but for a local regression's own block, which is the
 * diagonal of its points' weights; the right side is Z'Wz. The last block being diagonal it is eliminated beforehand.
 * Centred curves make the system regular and keep the response's mean, which a local regression by itself does not; what
 * each adds to the mean of its partial residuals (`level`) is given to the intercept, so that a single one is the plain
 * local regression F_1 P_1 z.
 * Sources: Hastie & Tibshirani (1990), sections 5.2 and 5.3; Speckman (1988), J. R. Statist. Soc. B 50 (one curve).
 */
export type JointSystem = {
  layout: PooledDesign;
  /** In the order of `layout.locals`. */
  operators: LocalOperator[];
  /** G, row-major, both triangles; Z'Wz about the response's shift. */
  cross: Float64Array;
  vector: Float64Array;
  /** Unknowns that are left, all but the last local regression's. */
  size: number;
  /** A_uu - A_uq W_q^-1 A_qu without penalties, row-major size x size; dropped coordinates are the identity's. */
  matrix: Float64Array;
  /** A_uq, row-major size x last.count. */
  above: Float64Array;
  /** W_q^-1 A_qu, row-major last.count x size. */
  below: Float64Array;
  /** r_u - A_uq W_q^-1 r_q. */
  reduced: Float64Array;
  /** Per joint unknown, what it adds to the model's level: mean over the weights of F_l e_l - e_l; zero for coordinates. */
  level: Float64Array;
  dropped: readonly DroppedColumn[];
};

/**
 * Forms the joint system of one working model from its cross-products.
 *
 * @param equations of the pooled design; the upper triangle of its matrix is filled in.
 * @param dropped coordinates that earlier ones reproduce.
 * Cost: O(entries of G that are not zero x points + size^2 x points).
 * @example jointSystem(layout, normalEquations(layout.pooled, rows, scratch), []).size;
 */
export function jointSystem(layout: PooledDesign, equations: NormalEquations, dropped: readonly DroppedColumn[]): JointSystem {
  const { size: all, locals } = layout;
  const cross = mirrored(equations.matrix, all);
  const operators = locals.map(({ basis, first, count }) => localOperator(basis, pointWeights(cross, all, { first, count })));
  const last = locals[locals.length - 1];
  const size = last.first;
  const above = new Float64Array(size * last.count);
  const matrix = new Float64Array(size * size);
  const below = new Float64Array(last.count * size);
  const row = new Float64Array(all);
  for (let i = 0; i < all; i++) {
    writeRow({ layout, operators, cross }, i, row);
    if (i >= size) for (let k = 0; k < size; k++) below[(i - size) * size + k] = row[k] / cross[i * (all + 1)];
    else {
      matrix.set(row.subarray(0, size), i * size);
      above.set(row.subarray(size), i * last.count);
    }
  }
  for (const { column } of dropped) clearCoordinate({ above, below, matrix, size }, column, last.count);
  const vector = equations.vector.slice();
  for (const { column } of dropped) vector[column] = 0;
  const reduced = vector.slice(0, size);
  const means = Float64Array.from({ length: last.count }, (_, k) => vector[size + k] / cross[(size + k) * (all + 1)]);
  const wide = { values: above, count: size, width: last.count };
  addProduct(wide, { values: means, count: last.count, width: 1 }, -1, reduced);
  denseProduct(wide, { values: below, count: last.count, width: size }).forEach((value, at) => { matrix[at] -= value; });
  return { layout, operators, cross, vector, size, matrix, above, below, reduced, level: levelOf(layout, operators), dropped };
}

/** Total working weight of the rows at each distinct point. */
const pointWeights = (cross: Float64Array, all: number, { first, count }: Pick<LocalPart, "first" | "count">): Float64Array =>
  Float64Array.from({ length: count }, (_, k) => cross[(first + k) * (all + 1)]);

function levelOf({ size, locals }: PooledDesign, operators: readonly LocalOperator[]): Float64Array {
  const level = new Float64Array(size);
  locals.forEach(({ first, count }, at) => {
    const { centred, basis: { weights, centring } } = operators[at];
    const total = weights.reduce((sum, weight) => sum + weight, 0);
    const own = level.subarray(first, first + count);
    addProduct({ values: weights, count: 1, width: count }, { values: centred, count, width: count }, 1 / total, own);
    for (let k = 0; k < count; k++) own[k] += centring[k] - weights[k] / total;
  });
  return level;
}

function mirrored(matrix: Float64Array, size: number): Float64Array {
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < row; column++) matrix[column * size + row] = matrix[row * size + column];
  }
  return matrix;
}

/** Row i of A: G K, but for a local regression's own block. */
function writeRow(of: Pick<JointSystem, "layout" | "operators" | "cross">, i: number, out: Float64Array): void {
  const { layout: { size, fixed, locals }, operators, cross } = of;
  out.fill(0);
  out.set(cross.subarray(i * size, i * size + fixed));
  locals.forEach(({ first, count }, at) => {
    const source = cross.subarray(i * size + first, i * size + first + count);
    const target = out.subarray(first, first + count);
    if (i >= first && i < first + count) target.set(source);
    else addProduct({ values: source, count: 1, width: count }, { values: operators[at].centred, count, width: count }, 1, target);
  });
}

function clearCoordinate(of: Pick<JointSystem, "above" | "below" | "matrix" | "size">, column: number, points: number): void {
  const { above, below, matrix, size } = of;
  for (let k = 0; k < size; k++) {
    matrix[k * size + column] = 0;
    matrix[column * size + k] = 0;
  }
  matrix[column * (size + 1)] = 1;
  above.fill(0, column * points, (column + 1) * points);
  for (let point = 0; point < points; point++) below[point * size + column] = 0;
}
