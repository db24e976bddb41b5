import { addProduct } from "../../linalg/add-product";
import { rowProducts } from "../../linalg/dense-products";
import { solveLu } from "../../linalg/pivoted-lu";
import type { JointSolution } from "./joint-solution";

/** Covariance over the dispersion, and effective degrees of freedom, per joint unknown or local regression. */
export type JointPosterior = {
  /** Row-major over the joint unknowns; zero for dropped coordinates. */
  covariance: Float64Array;
  /** Trace of each fixed coordinate's part of A^-1 Z'WZ K: one for unpenalised ones, zero for dropped ones. */
  coordinateEdf: Float64Array;
  /** The same for each local regression, its constant not counted, in the order of the layout. */
  localEdf: number[];
};

/** Inverse of the reduced matrix, row-major, zero for dropped coordinates. O(size^3). */
export function reducedInverse({ lu, system: { size, dropped } }: JointSolution): Float64Array {
  const identity = new Float64Array(size * size);
  for (let k = 0; k < size; k++) identity[k * (size + 1)] = 1;
  const inverse = solveLu(lu, identity, size);
  for (const { column } of dropped) inverse[column * (size + 1)] = 0;
  return inverse;
}

/**
 * Trace of the joint fit at each fixed coordinate: 1 - (A^-1)_kk S_k.
 *
 * @param inverse as `reducedInverse` gives.
 */
export function coordinateEdf({ system: { size, dropped, layout: { fixed } }, penalty }: JointSolution, inverse: Float64Array): Float64Array {
  const edf = new Float64Array(fixed);
  for (let k = 0; k < fixed; k++) edf[k] = 1 - inverse[k * (size + 1)] * penalty[k];
  for (const { column } of dropped) edf[column] = 0;
  return edf;
}

/**
 * Covariance A^-1 (Z'WZ + S) A^-T of the joint unknowns: the linear operator's for what is not penalised, local curves
 * included, the Bayesian posterior's for penalised coordinates. Unknowns being u (left) and q (eliminated), the inverse is
 * A^-1 = U V + E with U = [I; -W_q^-1 A_qu] B^-1, V = [I, -A_uq W_q^-1] and E = diag(0, W_q^-1), B the reduced matrix, so that
 * the covariance is U (V Q V') U' + U V Q E + (U V Q E)' + E Q E. Source: Hastie & Tibshirani (1990), section 5.4.4.
 *
 * Cost: O(unknowns^2 x size).
 */
export function jointPosterior(solution: JointSolution): JointPosterior {
  const { system: { layout } } = solution;
  const inverse = reducedInverse(solution);
  return {
    covariance: covarianceOf(solution, inverse),
    coordinateEdf: coordinateEdf(solution, inverse),
    localEdf: layout.locals.map((_, at) => localEdf(solution, inverse, at)),
  };
}

function covarianceOf(solution: JointSolution, inverse: Float64Array): Float64Array {
  const { system: { layout: { size: all }, size, cross, below } } = solution;
  const points = all - size;
  const spread = new Float64Array(all * size);
  spread.set(inverse);
  addProduct({ values: below, count: points, width: size }, { values: inverse, count: size, width: size }, -1, spread.subarray(size * size));
  const [middle, mixed] = middleOf(solution);
  const half = new Float64Array(all * size);
  addProduct({ values: spread, count: all, width: size }, { values: middle, count: size, width: size }, 0.5, half);
  for (let k = 0; k < points; k++) {
    for (let u = 0; u < size; u++) half[(size + k) * size + u] += mixed[u * points + k];
  }
  const product = new Float64Array(all * all);
  rowProducts({ values: half, count: all, width: size }, { values: spread, count: all, width: size }, product);
  for (let row = 0; row < all; row++) {
    for (let column = 0; column <= row; column++) {
      const value = product[row * all + column] + product[column * all + row];
      product[row * all + column] = value;
      product[column * all + row] = value;
    }
    if (row >= size) product[row * (all + 1)] += 1 / cross[row * (all + 1)];
  }
  return product;
}

/** V Q V' (size x size) and V Q E (size x points), with Q = G + S. */
function middleOf(solution: JointSolution): [Float64Array, Float64Array] {
  const { system, penalty } = solution;
  const { layout: { size: all }, size, cross, above, dropped } = system;
  const points = all - size;
  const shares = above.slice();
  for (let u = 0; u < size; u++) for (let k = 0; k < points; k++) shares[u * points + k] /= cross[(size + k) * (all + 1)];
  const isDropped = new Uint8Array(all);
  for (const { column } of dropped) isDropped[column] = 1;
  // V Q, row by row of V' Q': Q is symmetric and mostly zeros, so its rows are read as the left factor.
  const turned = new Float64Array(all * size);
  for (let row = 0; row < all; row++) {
    const own = turned.subarray(row * size, (row + 1) * size);
    for (let k = 0; k < all; k++) {
      const weight = cross[row * all + k] + (k === row && row < penalty.length ? penalty[row] : 0);
      if (weight === 0 || isDropped[row] === 1 || isDropped[k] === 1) continue;
      if (k < size) own[k] += weight;
      else for (let u = 0; u < size; u++) own[u] -= weight * shares[u * points + (k - size)];
    }
  }
  const middle = turned.slice(0, size * size);
  const mixed = new Float64Array(size * points);
  const tail = turned.subarray(size * size);
  for (let u = 0; u < size; u++) {
    for (let k = 0; k < points; k++) mixed[u * points + k] = tail[k * size + u] / cross[(size + k) * (all + 1)];
  }
  // (V Q V')_uv = (VQ)_uv - sum over k of (VQ)_uk shares_vk; `turned` holds VQ transposed, which is as good: VQV' is symmetric.
  addProduct({ values: shares, count: size, width: points }, { values: tail, count: points, width: size }, -1, middle);
  return [middle, mixed];
}

/** Sum over a local regression's unknowns of the diagonal of A^-1 Z'WZ K: count - sum of (A^-1)_ij w_j (I - F + 1c')_ji. */
function localEdf(solution: JointSolution, inverse: Float64Array, at: number): number {
  const { system: { layout: { size: all, locals }, operators, size, cross, above, below } } = solution;
  const { first, count } = locals[at];
  const { centred } = operators[at];
  const row = new Float64Array(count);
  let trace = 0;
  for (let i = 0; i < count; i++) {
    if (first < size) for (let j = 0; j < count; j++) row[j] = inverse[(first + i) * size + first + j] * cross[(first + j) * (all + 1)];
    else writeLastRow({ inverse, above, below, size, count }, i, row);
    let own = 1 - row[i];
    for (let j = 0; j < count; j++) own += row[j] * centred[j * count + i];
    trace += own;
  }
  return trace;
}

/** Row i of (A^-1)_qq W_q = I + W_q^-1 A_qu B^-1 A_uq. */
function writeLastRow(
  of: { inverse: Float64Array; above: Float64Array; below: Float64Array; size: number; count: number }, i: number, out: Float64Array,
): void {
  const { inverse, above, below, size, count } = of;
  const through = new Float64Array(size);
  addProduct({ values: below.subarray(i * size, (i + 1) * size), count: 1, width: size }, { values: inverse, count: size, width: size }, 1, through);
  out.fill(0);
  out[i] = 1;
  addProduct({ values: through, count: 1, width: size }, { values: above, count: size, width: count }, 1, out);
}
