import { choleskyInPlace, forwardSolve, backwardSolve } from "../linalg/cholesky";
import type { Design } from "./design";
import type { NormalEquations } from "./normal-equations";

/**
 * Rows c over the shared coordinates, row-major count x size: the curve keeps its shape where every c'b is at most 0.
 * `penalty`: per constraint, the penalty of its curve; `line`: the coordinate of its straight line.
 */
export type ShapeConstraints = { rows: Float64Array; count: number; size: number; penalty: Int32Array; line: Int32Array };

/**
 * What a model's shaped curves demand: differences of neighbouring spline coefficients have the right sign, which makes the
 * curve monotone everywhere (de Boor 1978, ch. XI: the derivative's coefficients).
 *
 * @returns null where no term has a shape.
 * @example shapeConstraints(design)?.count; // 7 for one curve of size 8
 */
export function shapeConstraints(design: Design): ShapeConstraints | null {
  const rows: Float64Array[] = [];
  const penalties: number[] = [];
  const lines: number[] = [];
  for (const { spec, basis, design: part } of design.terms) {
    if (spec.kind !== "smooth" || spec.shape === undefined || !("size" in basis)) continue;
    const { transform } = part.coordinates;
    if (transform.form !== "dense" && transform.form !== "blocks") continue;
    const sign = spec.shape === "decreasing" ? 1 : -1;
    const levels = transform.form === "blocks" ? transform.count : 1;
    const width = part.positions.length / levels;
    const firstPenalty = design.penalties.findIndex(({ id }) => id === part.id);
    for (let level = 0; level < levels; level++) {
      for (let k = 1; k < basis.size; k++) {
        const row = new Float64Array(design.size);
        for (let own = 0; own < width; own++) {
          row[part.positions[level * width + own]] = sign * (transform.matrix[k * width + own] - transform.matrix[(k - 1) * width + own]);
        }
        rows.push(row);
        penalties.push(firstPenalty + level);
        lines.push(part.positions[level * width]);
      }
    }
  }
  if (rows.length === 0) return null;
  const all = new Float64Array(rows.length * design.size);
  rows.forEach((row, at) => all.set(row, at * design.size));
  return { rows: all, count: rows.length, size: design.size, penalty: Int32Array.from(penalties), line: Int32Array.from(lines) };
}

/**
 * How many constraints of each penalty's curve are held. With any, the curve's straight line is no longer free: the penalty
 * has full rank on what is left.
 *
 * @example heldPerPenalty(constraints, Uint8Array.of(1, 0, 1), 1); // 2
 */
export function heldPerPenalty({ penalty }: ShapeConstraints, held: Uint8Array, count: number): Int32Array {
  const numbers = new Int32Array(count);
  for (let at = 0; at < held.length; at++) numbers[penalty[at]] += held[at];
  return numbers;
}

/**
 * Per penalty 1 where its curve is held and had a straight line of its own, not one that is left out (`dropped`).
 *
 * @example linesHeld(constraints, Uint8Array.of(1, 0, 1), { dropped: [], count: 1 }); // 1
 */
export function linesHeld({ penalty, line }: ShapeConstraints, held: Uint8Array, of: { dropped: readonly number[]; count: number }): Int32Array {
  const lines = new Int32Array(of.count);
  for (let at = 0; at < held.length; at++) if (held[at] === 1 && !of.dropped.includes(line[at])) lines[penalty[at]] = 1;
  return lines;
}

/** Weight, against the largest diagonal, by which a held constraint enters as a penalty. */
const heldWeight = 1e6;

/**
 * Normal equations with the held constraints as a heavy penalty (the asymmetric difference penalty of Bollaerts, Eilers &
 * van Mechelen 2006 at its present weights): by these, penalties and degrees of freedom are chosen.
 *
 * @param held 1 per constraint held at zero. `equations` is not changed.
 */
export function holdConstraints(equations: NormalEquations, constraints: ShapeConstraints, held: Uint8Array): NormalEquations {
  const { size, rows } = constraints;
  const matrix = equations.matrix.slice();
  let largest = 0;
  for (let k = 0; k < size; k++) largest = Math.max(largest, matrix[k * (size + 1)]);
  for (let at = 0; at < constraints.count; at++) {
    if (held[at] === 0) continue;
    const row = rows.subarray(at * size, (at + 1) * size);
    const weight = (heldWeight * largest) / row.reduce((sum, value) => sum + value * value, 0);
    for (let i = 0; i < size; i++) {
      if (row[i] === 0) continue;
      for (let j = 0; j <= i; j++) matrix[i * size + j] += weight * row[i] * row[j];
    }
  }
  return { ...equations, matrix };
}

/** A violation smaller than this share of the curve's spread is rounding. */
const rounding = 1e-13;

/**
 * The point nearest to the unconstrained estimate, in the metric of its precision, that keeps every constraint:
 * b - V C_h' m with m = (C_h V C_h')^-1 C_h b >= 0 for the held ones, found by adding the worst violated constraint and
 * letting go of those with a negative multiplier (Goldfarb & Idnani 1983, a dual active-set method).
 *
 * @param estimate shared coordinates. Not changed. covariance row-major, up to a factor.
 * @param start 1 per constraint to try as held first.
 * @returns the point, and which constraints hold it.
 */
export function projectOntoShape(
  of: { estimate: Float64Array; covariance: Float64Array }, constraints: ShapeConstraints, start: Uint8Array,
): { estimate: Float64Array; held: Uint8Array } {
  const { count } = constraints;
  const held = start.slice();
  const spread = spreadConstraints(of.covariance, constraints);
  const values = valuesOf(constraints, of.estimate);
  const scale = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  for (let turn = 0; turn < 20 * count; turn++) {
    const multipliers = multipliersOf({ spread, values, held, constraints });
    const leaving = smallest(multipliers, held);
    if (leaving >= 0) {
      held[leaving] = 0;
      continue;
    }
    const estimate = moved(of.estimate, spread, multipliers, constraints);
    const violated = mostViolated(valuesOf(constraints, estimate), held, rounding * scale);
    if (violated < 0) return { estimate, held };
    held[violated] = 1;
  }
  const multipliers = multipliersOf({ spread, values, held, constraints });
  return { estimate: moved(of.estimate, spread, multipliers, constraints), held };
}

/** V C': one row of length size per constraint. */
function spreadConstraints(covariance: Float64Array, { rows, count, size }: ShapeConstraints): Float64Array {
  const spread = new Float64Array(count * size);
  for (let at = 0; at < count; at++) {
    for (let i = 0; i < size; i++) {
      const weight = rows[at * size + i];
      if (weight === 0) continue;
      for (let j = 0; j < size; j++) spread[at * size + j] += weight * covariance[i * size + j];
    }
  }
  return spread;
}

function valuesOf({ rows, count, size }: ShapeConstraints, estimate: Float64Array): Float64Array {
  const values = new Float64Array(count);
  for (let at = 0; at < count; at++) {
    for (let k = 0; k < size; k++) values[at] += rows[at * size + k] * estimate[k];
  }
  return values;
}

function multipliersOf(
  of: { spread: Float64Array; values: Float64Array; held: Uint8Array; constraints: ShapeConstraints },
): Float64Array {
  const { spread, values, held, constraints: { rows, size, count } } = of;
  const active = Array.from(held.keys()).filter((at) => held[at] === 1);
  const matrix = new Float64Array(active.length * active.length);
  const right = Float64Array.from(active, (at) => values[at]);
  active.forEach((at, a) => {
    active.forEach((other, b) => {
      let sum = 0;
      for (let k = 0; k < size; k++) sum += rows[at * size + k] * spread[other * size + k];
      matrix[a * active.length + b] = sum * (a === b ? 1 + 1e-14 : 1);
    });
  });
  const multipliers = new Float64Array(count);
  if (active.length === 0 || !choleskyInPlace(matrix, active.length)) return multipliers;
  forwardSolve(matrix, active.length, right);
  backwardSolve(matrix, active.length, right);
  active.forEach((at, a) => { multipliers[at] = right[a]; });
  return multipliers;
}

function moved(estimate: Float64Array, spread: Float64Array, multipliers: Float64Array, { count, size }: ShapeConstraints): Float64Array {
  const out = estimate.slice();
  for (let at = 0; at < count; at++) {
    if (multipliers[at] === 0) continue;
    for (let k = 0; k < size; k++) out[k] -= multipliers[at] * spread[at * size + k];
  }
  return out;
}

/** The held constraint with the most negative multiplier, or -1. */
function smallest(multipliers: Float64Array, held: Uint8Array): number {
  let found = -1;
  for (let at = 0; at < held.length; at++) {
    if (held[at] === 1 && multipliers[at] < 0 && (found < 0 || multipliers[at] < multipliers[found])) found = at;
  }
  return found;
}

function mostViolated(values: Float64Array, held: Uint8Array, allowed: number): number {
  let found = -1;
  for (let at = 0; at < held.length; at++) {
    if (held[at] === 0 && values[at] > allowed && (found < 0 || values[at] > values[found])) found = at;
  }
  return found;
}
