import type { SplineRows } from "../linalg/sparse-rows";
import type { ModelData, ModelWarning } from "../types";
import { areAlike, isLong, repeatRows } from "./alike-rows";
import { covariate, numberColumn } from "./columns";
import { checkDistinct, checkSize, fewValuesWarning } from "./curve-checks";
import { distinctValues } from "./distinct-values";
import type { DistinctValues } from "./distinct-values";
import { rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";
import { splineRows, splineSlopeRows } from "./uniform-spline";

/** Equally spaced knots for a column (or its logarithm): `size` splines from `lower` to `upper`. */
export type SplineGrid = { column: string; log: boolean; size: number; lower: number; upper: number };

/** A grid with what it was learnt from: the column on the fitting scale, and its distinct values in its own unit. */
export type LearntGrid = {
  grid: SplineGrid;
  rows: SplineRows;
  x: Float64Array;
  seen: { values: Float64Array; counts: Float64Array };
  /** With each row's code, where asked for or worth while; null where there are too many to tell. */
  distinct: DistinctValues | null | undefined;
  observedRange: [number, number];
  warnings: ModelWarning[];
};

/** Share of the range's width by which the knots reach beyond it at each end. */
const widening = 0.001;

const intervalsOf = (grid: SplineGrid) => ({ lower: grid.lower, upper: grid.upper, intervals: grid.size - 3, wraps: false });

/**
 * Lays knots over a column's range, a little widened (Eilers & Marx 1996). O(n log n).
 *
 * @param from.size number of splines. from.role what the column is for, for messages. from.coded whether `distinct` is wanted.
 * @throws EngineError as `covariate`; spec-invalid, column-constant, column-few-values.
 * @example learnGrid({ column: "price", log: true, size: 8, id: "price", role: "smooth" }, data).grid.lower;
 */
export function learnGrid(
  from: { column: string; log?: boolean; size: number; id: string; role: string; coded?: boolean }, data: ModelData,
): LearntGrid {
  const size = checkSize(from.size, from.id);
  const x = covariate(data, from, from.role);
  const isLog = from.log === true;
  const own = isLog ? numberColumn(data, from.column, from.role) : x;
  const distinct = from.coded === true || isLong(own.length) ? distinctValues(own) : undefined;
  const seen = seenNumbers(own, distinct);
  checkDistinct(seen.values, from.column, from.id);
  const observedRange = rangeOf(seen.values);
  const [smallest, largest] = isLog ? [Math.log(observedRange[0]), Math.log(observedRange[1])] : observedRange;
  const margin = widening * (largest - smallest);
  const grid: SplineGrid = { column: from.column, log: isLog, size, lower: smallest - margin, upper: largest + margin };
  return {
    grid, x, seen, distinct, observedRange,
    rows: areAlike(distinct, x.length)
      ? repeatRows(splineRows(isLog ? distinct.values.map(Math.log) : distinct.values, intervalsOf(grid)), distinct.codes)
      : splineRows(x, intervalsOf(grid)),
    warnings: fewValuesWarning(seen.values.length, size, from.id),
  };
}

/** Spline values on a learnt grid for any data. */
export const gridRows = (grid: SplineGrid, data: ModelData, role: string): SplineRows =>
  splineRows(covariate(data, grid, role), intervalsOf(grid));

/**
 * Derivatives with respect to ln x, x in the column's own unit, for any data.
 *
 * @example gridLogSlopes(basis, { price: [1.49] }, "smooth").values;
 */
export function gridLogSlopes(grid: SplineGrid, data: ModelData, role: string): SplineRows {
  const rows = splineSlopeRows(covariate(data, grid, role), intervalsOf(grid));
  return grid.log ? rows : scaleSplines(rows, numberColumn(data, grid.column, role));
}

/**
 * Each row's values times a number of its own.
 *
 * @param by one number per row. Not changed.
 * @returns new rows; those given stay as they are.
 */
export const scaleSplines = (rows: SplineRows, by: Float64Array): SplineRows =>
  ({ ...rows, values: rows.values.map((value, at) => value * by[at >> 2]), alike: undefined });

/** Values of `size` evenly spaced points from one end of a range to the other, ends included. */
export const evenlySpaced = ([from, to]: readonly [number, number], size: number): Float64Array =>
  Float64Array.from({ length: size }, (_, k) => (k === size - 1 ? to : from + ((to - from) * k) / (size - 1)));

/** Splines at given positions on the fitting scale. */
export const gridRowsAt = (grid: SplineGrid, x: Float64Array): SplineRows => splineRows(x, intervalsOf(grid));
