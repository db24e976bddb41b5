import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { lowerHalf } from "../inference/arrow-products";
import { arrowRoot, conjugatedPenalty } from "../inference/arrow-root";
import type { Arrow } from "../inference/arrow-root";
import { withCentredLevels } from "../inference/level-centring";
import { penaltySlope } from "../inference/penalty-slope";
import { addScaled, posteriorOf } from "../inference/posterior";
import type { Posterior } from "../inference/posterior";
import { splineBasis } from "../inference/spline-basis";
import { termPlaces } from "../inference/term-places";
import type { PlacedPenalty } from "../inference/term-places";
import type { FittedModel, ModelBand } from "../types";
import { pointwiseModel } from "./pointwise-model";
import { coefficientMatrix } from "./shared-coefficients";

/** As the corrected degrees of freedom have them: bounds for curvature, and a prior precision in the second-order term. */
const leastCurvature = 1e-4;
const priorPrecision = 0.1;
/** Penalised degrees of freedom below which a penalty is at its limit: its log has no variance. */
const leastDegrees = 1e-4;
/** Shared coordinates beyond which the correction would take longer than the fit. */
const mostCoordinates = 300;

/**
 * The model with the uncertainty of chosen penalties in its covariance, by a Taylor expansion about the estimates:
 * V' = V + J V_rho J' + sum_jk (V_rho)_jk dB_j dB_k' x dispersion, J = db/drho, B B' = V / dispersion, V_rho the inverse of
 * the criterion's Hessian by the log penalties. Working weights are taken as fixed. A penalty at its limit moves nothing:
 * where a curve was smoothed to a line the expansion has no more to say than V (see `averagedModel`).
 * Source: Wood, Pya & Saefken (2016), J. Am. Statist. Assoc. 111, 1548-1575, section 4.
 *
 * @returns a model whose bands and predictions have V'; of groups' coefficients the part they share with all others. The
 * model itself where its covariance is of that kind already, where no penalty was chosen, with local regression, and beyond
 * 300 shared coordinates.
 * Cost: O(size^3 x penalties^2); about a millisecond for one series.
 * @example termCurve(correctedModel(model), "price").standardError;
 */
export function correctedModel(given: FittedModel): FittedModel {
  if (given.band === "corrected" || given.information === null || given.information.size > mostCoordinates) return given;
  const model = pointwiseModel(given);
  const information = withCentredLevels(model, given.information);
  const posterior = posteriorOf(model, information);
  if (posterior === null || !posterior.penalties.some(({ isEstimated }) => isEstimated)) return model;
  const root = arrowRoot(posterior, splineBasis(posterior, termPlaces(model, information)));
  return root === null ? model : withAdded(model, { band: "corrected", added: correction(posterior, root, model.dispersion) });
}

/**
 * The model with a matrix over its shared coordinates added to its covariance, which then is of another band.
 *
 * @param to.added symmetric, row-major; null adds nothing. Neither is changed.
 * @example withAdded(model, { band: "averaged", added: new Float64Array(information.size ** 2) }).covariance; // as before
 */
export function withAdded(model: FittedModel, to: { band: ModelBand; added: Float64Array | null }): FittedModel {
  const { band, added } = to;
  if (added === null) return { ...model, band };
  const onCoefficients = coefficientMatrix(model, added);
  return { ...model, band, covariance: model.covariance.map((value, at) => value + onCoefficients[at]) };
}

function correction(posterior: Posterior, root: Arrow, dispersion: number): Float64Array | null {
  const { size, information, penalties, grouped } = posterior;
  const moving = penalties.flatMap((penalty, j) => {
    const conjugated = penalty.isEstimated ? conjugatedPenalty(posterior, root, penalty) : null;
    if (conjugated === null || degreesUnder(posterior, penalty, conjugated) <= leastDegrees) return [];
    return [{ j, slope: penaltySlope(posterior, penalty).shared, root: rootSlope(root, lowerHalf(conjugated, size, grouped.length), size) }];
  });
  if (moving.length === 0) return null;
  const hessian = new Matrix(moving.map(({ j }) => moving.map(({ j: k }) => information.criterionHessian[j * penalties.length + k])));
  const first = halfInverse(hessian, (value) => Math.max(value, leastCurvature));
  const second = halfInverse(hessian, (value) => Math.max(value, 0) + priorPrecision);
  const added = new Float64Array(size * size);
  for (let column = 0; column < moving.length; column++) {
    const move = new Float64Array(size);
    const spread = new Float64Array(size * size);
    moving.forEach(({ slope, root: change }, a) => {
      addScaled(move, 0, slope, 0, size, first.get(a, column));
      addScaled(spread, 0, change, 0, size * size, Math.sqrt(dispersion) * second.get(a, column));
    });
    addSquare(added, move, size);
    addSquare(added, spread, size);
  }
  return added;
}

/** Penalised degrees of freedom under one penalty: its rank less tr(C S_j) = tr(B'S_jB). */
function degreesUnder({ size, grouped, groups }: Posterior, { diagonal, isGrouped }: PlacedPenalty, { own, shared }: Arrow): number {
  const rank = diagonal.reduce((sum, value) => sum + (value > 0 ? 1 : 0), 0) * (isGrouped ? (groups?.count ?? 1) : 1);
  let trace = 0;
  for (let k = 0; k < size; k++) trace += shared[k * size + k];
  for (let row = 0; row * grouped.length < own.length; row++) trace += own[row * grouped.length + (row % grouped.length)];
  return rank - trace;
}

/** Shared rows of -dB_j = B P_j', P_j the lower half; rows of B's shared coordinates have nothing in groups' columns. */
function rootSlope({ shared }: Arrow, half: Arrow, size: number): Float64Array {
  const out = new Float64Array(size * size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      let sum = 0;
      for (let k = 0; k <= column; k++) sum += shared[row * size + k] * half.shared[column * size + k];
      out[row * size + column] = sum;
    }
  }
  return out;
}

/** R with R R' the inverse of a symmetric matrix whose eigenvalues are replaced by bounded ones. */
function halfInverse(matrix: Matrix, bounded: (eigenvalue: number) => number): Matrix {
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(matrix, { assumeSymmetric: true });
  return eigenvectorMatrix.mmul(Matrix.diag(realEigenvalues.map((value) => 1 / Math.sqrt(bounded(value)))));
}

/** out += A A' with A row-major, `size` rows. */
function addSquare(out: Float64Array, matrix: Float64Array, size: number): void {
  const width = matrix.length / size;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      let sum = 0;
      for (let k = 0; k < width; k++) sum += matrix[row * width + k] * matrix[column * width + k];
      out[row * size + column] += sum;
    }
  }
}
