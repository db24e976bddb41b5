import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { entryProduct, lowerHalf, remainder, timesSymmetric } from "./arrow-products";
import { arrowRoot, conjugatedPenalty } from "./arrow-root";
import type { Arrow } from "./arrow-root";
import { rankDegrees } from "./penalty-share";
import { penaltySlope, slopeProduct } from "./penalty-slope";
import type { Posterior } from "./posterior";
import { splineBasis } from "./spline-basis";
import type { PlacedPenalty, TermPlace } from "./term-places";

/** Degrees of freedom of a whole model; `isCorrected` false where `corrected` is no more than its upper bound. */
export type ModelDegrees = { plain: number; bound: number; corrected: number; isCorrected: boolean };

/** A prior standard deviation of about 3 for each log penalty, in the second-order term: its expansion is not made for more. */
const priorPrecision = 0.1;
/** Bound on the curvature of the criterion in the first-order term. */
const leastCurvature = 1e-4;
/** Penalised degrees of freedom below which a penalty is at its limit: it moves nothing, and its log has no variance. */
const leastDegrees = 1e-4;
/** Shared coordinates beyond which the correction would take longer than the fit. */
const mostCoordinates = 300;

/**
 * Effective degrees of freedom with and without the uncertainty of the penalties: tr(F), its bound 2 tr(F) - tr(FF), and
 * tr(V' X'WX) with V' = C + J V_rho J' + sum_jk (V_rho)_jk dB_j dB_k', where J = db/drho, B B' = C, V_rho the inverse of the
 * criterion's Hessian by the log penalties; no more than the bound. Working weights are taken as fixed. With B's inverse
 * transpose triangular dB_j = -B P_j', P_j the lower triangle of B'S_jB, its diagonal halved.
 * Source: Wood, Pya & Saefken (2016), J. Am. Statist. Assoc. 111, 1548-1575, sections 4 and 5.
 *
 * @returns O(size^3 x penalties + penalties^2 x groups x group size x size).
 * @example modelDegrees(posterior, places, model.dispersion).corrected;
 */
export function modelDegrees(posterior: Posterior, places: readonly TermPlace[], dispersion: number): ModelDegrees {
  const { size, information, groups, covariance, shared, grouped } = posterior;
  const ranks = rankDegrees(posterior);
  const bound = total(ranks.shared) + total(ranks.grouped);
  let plain = size - information.dropped.length + (groups === null ? 0 : groups.count * groups.size);
  for (let k = 0; k < size; k++) plain -= shared[k] * covariance[k * size + k];
  for (let row = 0; groups !== null && row < groups.count * groups.size; row++) plain -= grouped[row % groups.size] * ownVariance(posterior, row);
  if (!posterior.penalties.some(({ isEstimated }) => isEstimated)) return { plain, bound, corrected: plain, isCorrected: true };
  const root = size > mostCoordinates ? null : arrowRoot(posterior, splineBasis(posterior, places));
  if (root === null) return { plain, bound, corrected: bound, isCorrected: false };
  const conjugated = posterior.penalties.map((penalty) => conjugatedPenalty(posterior, root, penalty));
  const moves = (penalty: PlacedPenalty, j: number) => penalty.isEstimated && blockDegrees(posterior, penalty, conjugated[j]) > leastDegrees;
  const moving = posterior.penalties.flatMap((penalty, j) => (moves(penalty, j) ? [j] : []));
  if (moving.length === 0) return { plain, bound, corrected: plain, isCorrected: true };
  const hessian = new Matrix(moving.map((j) => moving.map((k) => information.criterionHessian[j * posterior.penalties.length + k])));
  const variance = inverseBounded(hessian, (value) => Math.max(value, leastCurvature));
  const tempered = inverseBounded(hessian, (value) => Math.max(value, 0) + priorPrecision);
  const halved = moving.map((j) => lowerHalf(conjugated[j], size, grouped.length));
  const kept = remainder(posterior, conjugated);
  const slopes = moving.map((j) => penaltySlope(posterior, posterior.penalties[j]));
  const times = halved.map((half) => timesSymmetric(half, kept, size, grouped.length));
  let corrected = plain;
  moving.forEach((_j, a) => moving.forEach((_k, b) => {
    corrected += (variance.get(a, b) * slopeProduct(posterior, slopes[a], slopes[b])) / dispersion;
    corrected += tempered.get(a, b) * entryProduct(times[a], halved[b]);
  }));
  return { plain, bound, corrected: Math.max(plain, Math.min(corrected, bound)), isCorrected: true };
}

const total = (values: Float64Array): number => values.reduce((sum, value) => sum + value, 0);

/** Variance of a group's coordinate over the dispersion. */
function ownVariance({ groups, covariance, size }: Posterior, row: number): number {
  if (groups === null) return 0;
  const link = groups.link.subarray(row * size, (row + 1) * size);
  let sum = groups.own[row * groups.size + (row % groups.size)];
  for (let k = 0; k < size; k++) for (let l = 0; l < size; l++) sum += link[k] * covariance[k * size + l] * link[l];
  return sum;
}

/** Penalised degrees of freedom under one penalty: its rank less tr(C S_j) = tr(B'S_jB). */
function blockDegrees({ size, grouped, groups }: Posterior, { positions, diagonal, isGrouped }: PlacedPenalty, { own, shared }: Arrow): number {
  let trace = 0;
  for (let k = 0; k < size; k++) trace += shared[k * size + k];
  for (let row = 0; row * grouped.length < own.length; row++) trace += own[row * grouped.length + (row % grouped.length)];
  const rank = diagonal.reduce((sum, value) => sum + (value > 0 ? 1 : 0), 0);
  return rank * (isGrouped && positions.length > 0 ? (groups?.count ?? 1) : 1) - trace;
}

/** Inverse of a symmetric matrix with each eigenvalue replaced by its bounded one. */
function inverseBounded(matrix: Matrix, bounded: (eigenvalue: number) => number): Matrix {
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(matrix, { assumeSymmetric: true });
  const inverse = Matrix.diag(realEigenvalues.map((value) => 1 / bounded(value)));
  return eigenvectorMatrix.mmul(inverse).mmul(eigenvectorMatrix.transpose());
}
