import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { basisRows } from "../basis/term-basis";
import { EngineError } from "../errors";
import { seededRandom } from "../inference/random";
import { packedIndex } from "../linalg/packed-symmetric";
import { entriesPerRow, gatherRow } from "../linalg/sparse-rows";
import type { FittedModel, TermCurve, TermCurveOptions } from "../types";
import { bandModel, hasMean } from "./band-model";
import { curveData } from "./curve-data";
import { curvePoints } from "./curve-points";
import { extendModel } from "./extend-model";
import { findTerm } from "./find-term";
import { normalQuantile } from "./level";
import { levelParts } from "./level-parts";
import { covarianceQuadratic, sharedCount } from "./model-covariance";
import { termCurve } from "./term-curve";

export type SimultaneousOptions = Omit<TermCurveOptions, "derivative"> & {
  /** Curves drawn from the posterior (default 10,000). */
  draws?: number;
  /** Of the draws: a whole number (default 1); the same seed gives the same band. */
  seed?: number;
};

const defaultLevel = 0.95;
const defaultDraws = 10_000;
const fewestDraws = 100;
const mostDraws = 1_000_000;
/** Eigenvectors of more coefficients than this are too slow for a curve on a screen. */
const mostCoefficients = 400;
/** Eigenvalues of a covariance below this share of the largest are rounding. */
const smallestEigenvalue = 1e-13;
/** Standard errors below this share of the largest are rounding: there the curve is known, as a line's at its centre. */
const smallestShare = 1e-9;

/**
 * By how many standard errors a band must stand off to hold the whole curve, not each point by itself, with the probability
 * `level`: the quantile of max |deviation| / (standard error) over the points, for deviations drawn from the posterior
 * N(0, V). Points where the curve is known exactly count for nothing.
 * Source: Ruppert, Wand & Carroll (2003), Semiparametric Regression, section 6.5.
 *
 * @param options points, at, group and band as `termCurve`; level; draws and seed.
 * @returns `normalQuantile(level)` for a straight line, more the more a curve can bend. Its own error by simulation is
 * about 0.01 to 0.02 at 10,000 draws.
 * @throws EngineError as `termCurve`; option-invalid for draws, seed, or more than 400 coefficients.
 * Cost: O(draws x points x coefficients of the curve).
 * @example simultaneousQuantile(model, "price"); // 2.9
 */
export function simultaneousQuantile(model: FittedModel, termId: string, options: SimultaneousOptions = {}): number {
  const level = options.level ?? defaultLevel;
  const pointwise = normalQuantile(level);
  const draws = checkDraws(options.draws ?? defaultDraws);
  const random = seededRandom(options.seed ?? 1);
  const standardised = standardisedRoot(model, termId, options);
  const { rows, columns } = standardised;
  // Nothing bends: one point alone, or all straying together as those of a straight line do.
  if (rows <= 1 || columns === 1) return pointwise;
  const entries = standardised.to1DArray();
  const normals = new Float64Array(columns);
  const largest = new Float64Array(draws);
  for (let draw = 0; draw < draws; draw++) {
    for (let k = 0; k < columns; k++) normals[k] = random.normal();
    let most = 0;
    for (let row = 0; row < rows; row++) {
      let deviation = 0;
      for (let k = 0; k < columns; k++) deviation += entries[row * columns + k] * normals[k];
      most = Math.max(most, Math.abs(deviation));
    }
    largest[draw] = most;
  }
  return largest.sort()[Math.min(draws - 1, Math.ceil(level * draws) - 1)];
}

/**
 * A term's curve as `termCurve` gives it, with a band that holds the whole curve with the probability `level`.
 *
 * @throws EngineError as `simultaneousQuantile`.
 * @example simultaneousBand(model, "price", { points: 60, seed: 7 }).lower;
 */
export function simultaneousBand(model: FittedModel, termId: string, options: SimultaneousOptions = {}): TermCurve {
  const { points, at, group, level, band } = options;
  const curve = termCurve(model, termId, { points, at, group, level, band });
  const quantile = simultaneousQuantile(model, termId, options);
  return {
    ...curve,
    lower: curve.estimate.map((value, k) => value - quantile * curve.standardError[k]),
    upper: curve.estimate.map((value, k) => value + quantile * curve.standardError[k]),
  };
}

function checkDraws(draws: number): number {
  if (Number.isInteger(draws) && draws >= fewestDraws && draws <= mostDraws) return draws;
  throw new EngineError("option-invalid", `draws is ${draws}; it must be a whole number from ${fewestDraws} to ${mostDraws}.`);
}

/** Matrix A of one row per point with uncertainty: A z, z standard normal, are the curve's standardised deviations. */
function standardisedRoot(model: FittedModel, termId: string, options: SimultaneousOptions): Matrix {
  const term = findTerm(model, termId);
  const x = curvePoints(term, options);
  const { basis, data } = curveData(model, term, { x, group: options.group });
  const extended = extendModel(bandModel(model, options.band), data);
  const at = findTerm(extended, termId);
  const rows = basisRows(basis.kind === "random-walk" ? at.basis : basis, data);
  const beside = hasMean(options.band) ? levelParts(extended, at, { count: x.length, group: options.group }) : [];
  const parts = [...beside, { id: termId, first: at.first, rows }];
  const entries = parts.reduce((sum, part) => sum + entriesPerRow(part.rows), 0);
  const into = { indices: new Int32Array(entries), values: new Float64Array(entries), count: 0 };
  const columnOf = new Map<number, number>();
  const cells: [row: number, column: number, value: number][] = [];
  for (let row = 0; row < x.length; row++) {
    let count = 0;
    for (const part of parts) count = gatherRow(part.rows, row, part.first, { ...into, count });
    for (let k = 0; k < count; k++) {
      if (into.values[k] === 0) continue;
      const index = into.indices[k];
      const column = columnOf.get(index) ?? columnOf.size;
      columnOf.set(index, column);
      cells.push([row, column, into.values[k]]);
    }
  }
  const root = covarianceRoot(extended, termId, [...columnOf.keys()]);
  const deviations = Matrix.zeros(x.length, root.columns);
  for (const [row, column, value] of cells) {
    for (let k = 0; k < root.columns; k++) deviations.set(row, k, deviations.get(row, k) + value * root.get(column, k));
  }
  const errors = Array.from({ length: x.length }, (_, row) => Math.sqrt(deviations.getRow(row).reduce((sum, value) => sum + value * value, 0)));
  const largest = errors.reduce((most, value) => Math.max(most, value), 0);
  const kept = errors.flatMap((error, row) => (error > smallestShare * largest ? [row] : []));
  return new Matrix(kept.map((row) => deviations.getRow(row).map((value) => value / errors[row])));
}

/** R with R R' the covariance of some coefficients, by its eigenvectors: centred curves' covariances are singular. */
function covarianceRoot(model: FittedModel, termId: string, indices: readonly number[]): Matrix {
  const size = indices.length;
  if (size > mostCoefficients) {
    throw new EngineError(
      "option-invalid",
      `Term "${termId}" has ${size} coefficients at the values asked for; simultaneous bands are made of up to ${mostCoefficients}: `
      + 'ask for fewer by "at".',
    );
  }
  if (size === 0) return Matrix.zeros(0, 0);
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(coefficientCovariance(model, indices), { assumeSymmetric: true });
  const largest = Math.max(...realEigenvalues);
  const kept = realEigenvalues.flatMap((value, k) => (value > smallestEigenvalue * largest ? [k] : []));
  return new Matrix(indices.map((_index, row) => kept.map((k) => eigenvectorMatrix.get(row, k) * Math.sqrt(realEigenvalues[k]))));
}

function coefficientCovariance(model: FittedModel, indices: readonly number[]): Matrix {
  const size = indices.length;
  const matrix = Matrix.zeros(size, size);
  const isShared = indices.every((index) => index < sharedCount(model));
  const units = isShared ? [] : indices.map((index) => {
    const unit = new Float64Array(model.coefficients.length);
    unit[index] = 1;
    return unit;
  });
  for (let row = 0; row < size; row++) {
    for (let column = 0; column <= row; column++) {
      const value = isShared
        ? model.covariance[packedIndex(indices[row], indices[column])]
        : covarianceQuadratic(model, units[row], units[column]);
      matrix.set(row, column, value);
      matrix.set(column, row, value);
    }
  }
  return matrix;
}
