import { crossProduct } from "../linalg/cross-products";
import type { SplineRows } from "../linalg/sparse-rows";
import type { FactorSmoothBasis, FactorSmoothTerm, ModelData } from "../types";
import type { BasisKind } from "./basis-kind";
import { levelColumn, numberColumn } from "./columns";
import { learnLevels, levelPositions, splinesPerLevel } from "./levels";
import { outsideRange } from "./ranges";
import { seenPerLevel } from "./seen-values";
import { gridLogSlopes, gridRows, learnGrid } from "./spline-grid";
import type { SplineGrid } from "./spline-grid";

const role = "factor-smooth";
const groupRole = "factor-smooth's group";
/** Splines of a group's curve that names no size. */
export const defaultFactorSmoothSize = 6;

/**
 * One curve per group, a deviation from the column's own smooth, in three parts: level, slope, and a wiggly part that is
 * orthogonal over all rows to both, so that each part's penalty speaks of that part alone. A group never seen has rows of
 * zeros: it is predicted by the column's own smooth.
 */
export const factorSmooth: BasisKind<FactorSmoothTerm, FactorSmoothBasis> = {
  learn(term, id, data) {
    const learnt = learnGrid({ column: term.column, log: term.log, size: term.size ?? defaultFactorSmoothSize, id, role, coded: true }, data);
    const { levels, index } = learnLevels(data, term.group, groupRole);
    return {
      basis: { kind: "factor-smooth", ...learnt.grid, group: term.group, levels, toCoefficients: partsOf(learnt.grid, learnt.rows, learnt.x) },
      rows: splinesPerLevel(learnt.rows, index, levels.length),
      seen: { ...learnt.seen, byLevel: seenPerLevel(numberColumn(data, term.column, role), index, levels.length, learnt.distinct) },
      observedRange: learnt.observedRange,
      warnings: learnt.warnings,
    };
  },
  rows: (basis, data) => splinesPerLevel(gridRows(basis, data, role), positionsIn(basis, data), basis.levels.length),
  logSlopeRows: (basis, data) => splinesPerLevel(gridLogSlopes(basis, data, role), positionsIn(basis, data), basis.levels.length),
  outside(range, basis, data) {
    const positions = positionsIn(basis, data);
    return outsideRange(range, numberColumn(data, basis.column, role)).map((flag, row) => (positions[row] < 0 ? 1 : flag));
  },
  names: (basis, id) => basis.levels.flatMap((level) => Array.from({ length: basis.size }, (_, k) => `${id}[${level},${k + 1}]`)),
};

const positionsIn = (basis: FactorSmoothBasis, data: ModelData): Int32Array =>
  levelPositions(basis.levels, levelColumn(data, basis.group, groupRole));

/**
 * Coefficients of level, slope (x less its mean, in standard deviations) and wiggly part. Column j of the wiggly part starts
 * as max(0, k - j - 1), whose second differences are the j-th unit vector, so the difference penalty is the identity; a level
 * and a slope taken off it change no second difference.
 */
function partsOf(grid: SplineGrid, rows: SplineRows, x: Float64Array): Float64Array {
  const { size } = grid;
  const { mean, spread } = momentsOf(x);
  const step = (grid.upper - grid.lower) / (size - 3);
  const square = new Float64Array(size * size);
  crossProduct(rows, rows, new Float64Array(x.length).fill(1), square);
  const parts = new Float64Array(size * size);
  for (let k = 0; k < size; k++) {
    parts[k * size] = 1;
    // A spline's coefficient in the line x is the middle of its knots.
    parts[k * size + 1] = (grid.lower + step * (k - 1) - mean) / spread;
    for (let j = 2; j < size; j++) parts[k * size + j] = Math.max(0, k - j + 1);
  }
  const before = parts.slice();
  for (let j = 2; j < size; j++) {
    // The second pass takes off what rounding left.
    for (const part of [0, 1, 0, 1]) takeOff(parts, { size, square, part, column: j });
    if (across(square, parts, { size, left: j, right: j }) > leastShare * across(square, before, { size, left: j, right: j })) continue;
    // Of rows in two places level and slope are all there is: nothing but rounding would be left.
    for (let k = 0; k < size; k++) parts[k * size + j] = before[k * size + j];
  }
  return parts;
}

/** Share of a column's sum of squares that must be left of it. */
const leastShare = 1e-10;

/** Product of two columns over the rows, in the metric B'B. */
function across(square: Float64Array, parts: Float64Array, of: { size: number; left: number; right: number }): number {
  const { size, left, right } = of;
  let sum = 0;
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < size; k++) sum += parts[i * size + left] * square[i * size + k] * parts[k * size + right];
  }
  return sum;
}

/** Takes from a column its projection on `part`. */
function takeOff(parts: Float64Array, at: { size: number; square: Float64Array; part: number; column: number }): void {
  const { size, square, part, column } = at;
  const share = across(square, parts, { size, left: part, right: column }) / across(square, parts, { size, left: part, right: part });
  for (let k = 0; k < size; k++) parts[k * size + column] -= share * parts[k * size + part];
}

function momentsOf(x: Float64Array): { mean: number; spread: number } {
  const mean = x.reduce((sum, value) => sum + value, 0) / x.length;
  const squares = x.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { mean, spread: Math.sqrt(squares / x.length) };
}
