import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { familyRules } from "../family/family";
import { withCentredLevels } from "../inference/level-centring";
import { posteriorOf } from "../inference/posterior";
import type { Posterior } from "../inference/posterior";
import type { PlacedPenalty } from "../inference/term-places";
import { choleskyInPlace, invertFactored } from "../linalg/cholesky";
import type { FittedModel } from "../types";
import { withAdded } from "./corrected-model";
import { averageOver } from "./penalty-average";
import { pointwiseModel } from "./pointwise-model";
import type { PenalisedBlock } from "./penalty-average";

/** Coordinates under one penalty that are turned by eigenvectors within a few milliseconds. */
const mostCoordinates = 300;
/** With one coordinate alone a uniform standard deviation has no proper posterior. */
const fewestCoordinates = 2;

/**
 * The model with the uncertainty of chosen penalties in its covariance, averaged over all that the rows leave possible:
 * V' = average of [V(rho) + (b(rho) - b)(b(rho) - b)'] by the posterior of the log penalty rho, one penalty at a time, the
 * others and working weights as they are. Where a curve was smoothed to a line although bent ones fit as well, the band opens.
 * The posterior is exp(-restricted likelihood criterion) times a uniform prior of the coordinates' standard deviation,
 * which is proper however flat the criterion is towards a line.
 * Sources: Wood, Pya & Saefken (2016), J. Am. Statist. Assoc. 111, 1548-1575, section 4, for what is averaged; Gelman (2006),
 * Bayesian Analysis 1, 515-534, for the prior.
 *
 * @returns a model whose bands and predictions have V'; coefficients stay. Left out: penalties on eliminated groups, those of
 * one coordinate or of more than 300. Where no penalty was chosen V' is V, and the model only says so. The model itself where
 * its covariance is averaged already, where all chosen ones are left out, with local regression, and for perfect fits.
 * Cost: O(size^2 x coordinates of a penalty) per penalty; well below a millisecond for one series.
 * @example termCurve(averagedModel(model), "price").standardError;
 */
export function averagedModel(given: FittedModel): FittedModel {
  if (given.band === "averaged" || given.information === null) return given;
  const model = pointwiseModel(given);
  const posterior = posteriorOf(model, withCentredLevels(model, given.information));
  if (posterior === null) return model;
  if (!posterior.penalties.some(({ isEstimated }) => isEstimated)) return withAdded(model, { band: "averaged", added: null });
  const residual = penalisedResidual(model, posterior);
  if (!(residual > 0)) return model;
  const added = new Float64Array(posterior.size * posterior.size);
  let any = false;
  for (const penalty of posterior.penalties) {
    if (!penalty.isEstimated || penalty.isGrouped) continue;
    const block = blockOf(posterior, penalty);
    if (block === null) continue;
    const degreesOfFreedom = familyRules(model.spec.family).scale === "known" ? null : model.rowCount - unpenalisedKept(posterior);
    addSpread(added, posterior, block, averageOver(block, { multiplier: penalty.multiplier, dispersion: model.dispersion, residual, degreesOfFreedom }));
    any = true;
  }
  return any ? withAdded(model, { band: "averaged", added }) : model;
}

const unpenalisedKept = ({ information }: Posterior): number =>
  information.unpenalised - information.dropped.filter((position) => position < information.unpenalised).length;

/** D + b'Sb of the last working model. */
function penalisedResidual({ dispersion, rowCount, edf }: FittedModel, { information, shared, grouped }: Posterior): number {
  let sum = dispersion * (rowCount - edf);
  for (let k = 0; k < shared.length; k++) sum += shared[k] * information.coordinates[k] ** 2;
  information.groups?.coordinates.forEach((value, line) => { sum += grouped[line % grouped.length] * value * value; });
  return sum;
}

type TurnedBlock = PenalisedBlock & { positions: number[]; vectors: Matrix; precision: Float64Array };

/**
 * The coordinates under one penalty, all others eliminated, turned so that their information is diagonal and the penalty the
 * identity; null where there are too few or too many.
 */
function blockOf({ covariance, size, shared, information }: Posterior, penalty: PlacedPenalty): TurnedBlock | null {
  const dropped = new Set(information.dropped);
  const kept = Array.from(penalty.positions, (position, k) => ({ position, weight: penalty.diagonal[k] }))
    .filter(({ position, weight }) => weight > 0 && !dropped.has(position));
  const width = kept.length;
  if (width < fewestCoordinates || width > mostCoordinates) return null;
  const own = Float64Array.from({ length: width * width }, (_, at) => covariance[kept[Math.floor(at / width)].position * size + kept[at % width].position]);
  const precision = new Float64Array(width * width);
  if (!choleskyInPlace(own, width)) return null;
  invertFactored(own, width, precision);
  const scaled = new Matrix(kept.map(({ weight }, row) => kept.map(({ weight: other }, column) =>
    precision[row * width + column] / Math.sqrt(weight * other) - (row === column ? penalty.multiplier : 0))));
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(scaled, { assumeSymmetric: true });
  const vectors = new Matrix(kept.map(({ weight }, row) => realEigenvalues.map((_value, k) => eigenvectorMatrix.get(row, k) / Math.sqrt(weight))));
  return {
    positions: kept.map(({ position }) => position), vectors, precision,
    information: Float64Array.from(realEigenvalues, (value) => Math.max(0, value)),
    estimates: Float64Array.from(realEigenvalues, (_value, k) =>
      kept.reduce((sum, { position, weight }, row) => sum + eigenvectorMatrix.get(row, k) * Math.sqrt(weight) * information.coordinates[position], 0)),
    // What other penalties add on the same coordinates, in units of this one's.
    others: Float64Array.from(kept, ({ position, weight }) => Math.max(0, shared[position] / weight - penalty.multiplier)),
  };
}

/** added += G Q G', Q the block's spread, G = C_.o C_oo^-1: how all coordinates move with the block's own. */
function addSpread(added: Float64Array, { covariance, size }: Posterior, block: TurnedBlock, spread: Float64Array): void {
  const { positions, vectors, precision } = block;
  const width = positions.length;
  const own = vectors.mmul(Matrix.from1DArray(width, width, spread)).mmul(vectors.transpose());
  const meeting = new Matrix(Array.from({ length: size }, (_, row) => positions.map((position) => covariance[row * size + position])));
  const moves = meeting.mmul(Matrix.from1DArray(width, width, precision));
  const whole = moves.mmul(own).mmul(moves.transpose()).to1DArray();
  for (let at = 0; at < added.length; at++) added[at] += whole[at];
}
