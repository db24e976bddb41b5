import { denseProduct, transposed } from "../../linalg/dense-product";
import { rowProducts } from "../../linalg/tiles";
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
  const { system: { layout: { size: all, locals }, size, below } } = solution;
  const inverse = reducedInverse(solution);
  const points = all - size;
  const through = denseProduct({ values: below, count: points, width: size }, { values: inverse, count: size, width: size });
  return {
    covariance: covarianceOf(solution, inverse, through),
    coordinateEdf: coordinateEdf(solution, inverse),
    localEdf: locals.map((_, at) => localEdf(solution, { inverse, through }, at)),
  };
}

/** @param through W_q^-1 A_qu B^-1, row-major points x size. */
function covarianceOf(solution: JointSolution, inverse: Float64Array, through: Float64Array): Float64Array {
  const { system: { layout: { size: all }, size, cross } } = solution;
  const spread = new Float64Array(all * size);
  spread.set(inverse);
  for (let at = 0; at < through.length; at++) spread[size * size + at] = -through[at];
  const [middle, mixed] = middleOf(solution);
  const half = denseProduct({ values: spread, count: all, width: size }, { values: middle, count: size, width: size });
  for (let at = 0; at < half.length; at++) half[at] /= 2;
  for (let at = 0; at < mixed.length; at++) half[size * size + at] += mixed[at];
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

/** V Q V' (size x size) and the transpose of V Q E (points x size), with Q = G + S. */
function middleOf(solution: JointSolution): [Float64Array, Float64Array] {
  const { system: { layout: { size: all }, size, cross, above } } = solution;
  const points = all - size;
  const shares = transposed(above, size, points);
  for (let k = 0; k < points; k++) for (let u = 0; u < size; u++) shares[k * size + u] /= cross[(size + k) * (all + 1)];
  const turned = turnedRows(solution, shares);
  const tail = turned.subarray(size * size);
  // (V Q V')_uv = (V Q)_uv - sum over k of (V Q)_uk shares_kv; `turned` is V Q transposed.
  const middle = turned.slice(0, size * size);
  const taken = denseProduct({ values: transposed(tail, points, size), count: size, width: points }, { values: shares, count: points, width: size });
  for (let at = 0; at < middle.length; at++) middle[at] -= taken[at];
  for (let k = 0; k < points; k++) for (let u = 0; u < size; u++) tail[k * size + u] /= cross[(size + k) * (all + 1)];
  return [middle, tail];
}

/** Q V', row-major unknowns x size: Q is mostly zeros, which cost nothing. */
function turnedRows({ system, penalty }: JointSolution, shares: Float64Array): Float64Array {
  const { layout: { size: all }, size, cross, dropped } = system;
  const isDropped = new Uint8Array(all);
  for (const { column } of dropped) isDropped[column] = 1;
  const turned = new Float64Array(all * size);
  for (let row = 0; row < all; row++) {
    const own = turned.subarray(row * size, (row + 1) * size);
    for (let k = 0; k < all; k++) {
      const weight = cross[row * all + k] + (k === row && row < penalty.length ? penalty[row] : 0);
      if (weight === 0 || isDropped[row] === 1 || isDropped[k] === 1) continue;
      if (k < size) own[k] += weight;
      else for (let u = 0, from = (k - size) * size; u < size; u++) own[u] -= weight * shares[from + u];
    }
  }
  return turned;
}

/** Sum over a local regression's unknowns of the diagonal of A^-1 Z'WZ K: count - sum of (A^-1)_ij w_j (I - F + 1c')_ji. */
function localEdf(solution: JointSolution, of: { inverse: Float64Array; through: Float64Array }, at: number): number {
  const { system: { layout: { size: all, locals }, operators, size, cross } } = solution;
  const { first, count } = locals[at];
  const turned = transposed(operators[at].centred, count, count);
  const isLast = first === size;
  const block = isLast ? lastBlock(solution, of.through) : null;
  let trace = 0;
  for (let i = 0; i < count; i++) {
    trace += 1;
    for (let j = 0; j < count; j++) {
      const entry = block === null ? of.inverse[(first + i) * size + first + j] * cross[(first + j) * (all + 1)] : block[i * count + j];
      trace += entry * (turned[i * count + j] - (i === j ? 1 : 0));
    }
  }
  return trace;
}

/** (A^-1)_qq W_q = I + W_q^-1 A_qu B^-1 A_uq. */
function lastBlock({ system: { layout: { size: all }, size, above } }: JointSolution, through: Float64Array): Float64Array {
  const points = all - size;
  const block = denseProduct({ values: through, count: points, width: size }, { values: above, count: size, width: points });
  for (let k = 0; k < points; k++) block[k * (points + 1)] += 1;
  return block;
}
