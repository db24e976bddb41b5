import { projectOntoShape } from "@shared/engine/fit/shape-constraints";
import type { ShapeConstraints } from "@shared/engine/fit/shape-constraints";
import fc from "fast-check";
import { expect, it } from "vitest";
import { seededNormal } from "../support/generator";

type Problem = { size: number; count: number; precision: Float64Array; covariance: Float64Array; estimate: Float64Array; constraints: ShapeConstraints };

/** A random symmetric positive definite matrix with its inverse (by Gauss-Jordan), constraints and a point to project. */
function problemOf(seed: number, size: number, count: number): Problem {
  const normal = seededNormal(seed);
  const root = Float64Array.from({ length: size * size }, normal);
  const precision = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) {
      for (let k = 0; k < size; k++) precision[i * size + j] += root[i * size + k] * root[j * size + k];
    }
    precision[i * (size + 1)] += 0.5;
  }
  return {
    size, count, precision, covariance: inverseOf(precision, size),
    estimate: Float64Array.from({ length: size }, normal),
    constraints: { rows: Float64Array.from({ length: count * size }, normal), count, size, penalty: new Int32Array(count), line: new Int32Array(count) },
  };
}

function inverseOf(matrix: Float64Array, size: number): Float64Array {
  const left = matrix.slice();
  const right = Float64Array.from({ length: size * size }, (_, at) => Number(at % (size + 1) === 0));
  for (let pivot = 0; pivot < size; pivot++) {
    const scale = left[pivot * (size + 1)];
    for (let k = 0; k < size; k++) {
      left[pivot * size + k] /= scale;
      right[pivot * size + k] /= scale;
    }
    for (let row = 0; row < size; row++) {
      const weight = left[row * size + pivot];
      if (row === pivot || weight === 0) continue;
      for (let k = 0; k < size; k++) {
        left[row * size + k] -= weight * left[pivot * size + k];
        right[row * size + k] -= weight * right[pivot * size + k];
      }
    }
  }
  return right;
}

const times = (matrix: Float64Array, vector: ArrayLike<number>, size: number) =>
  Array.from({ length: matrix.length / size }, (_, row) => Array.from({ length: size }, (__, k) => matrix[row * size + k] * vector[k]).reduce((sum, value) => sum + value, 0));

/** Distance in the metric of the precision, squared. */
function distance({ precision, estimate, size }: Problem, point: ArrayLike<number>): number {
  const move = Array.from(estimate, (value, k) => point[k] - value);
  return times(precision, move, size).reduce((sum, value, k) => sum + value * move[k], 0);
}

/** The same point by Hildreth's (1957) cyclic projections on the multipliers: slow, and plain. */
function plainProjection({ covariance, estimate, constraints: { rows, count }, size }: Problem): number[] {
  const spread = Array.from({ length: count }, (_, at) => times(covariance, rows.subarray(at * size, (at + 1) * size), size));
  const point = Array.from(estimate);
  const multipliers = new Float64Array(count);
  for (let turn = 0; turn < 20_000; turn++) {
    for (let at = 0; at < count; at++) {
      const row = rows.subarray(at * size, (at + 1) * size);
      const value = point.reduce((sum, own, k) => sum + own * row[k], 0);
      const own = spread[at].reduce((sum, entry, k) => sum + entry * row[k], 0);
      const next = Math.max(0, multipliers[at] + value / own);
      for (let k = 0; k < size; k++) point[k] -= (next - multipliers[at]) * spread[at][k];
      multipliers[at] = next;
    }
  }
  return point;
}

const problems = fc.record({ seed: fc.nat(1e6), size: fc.integer({ min: 2, max: 7 }), share: fc.integer({ min: 1, max: 8 }), start: fc.integer({ min: 0, max: 255 }) });

// No more constraints than dimensions, as for curves: any set of them can be held at once.
const of = (drawn: { seed: number; size: number; share: number }) => problemOf(drawn.seed, drawn.size, Math.min(drawn.size, drawn.share));

it("The nearest point of a shape keeps every constraint and meets the conditions of Karush, Kuhn & Tucker", () => {
  fc.assert(fc.property(problems, (drawn) => {
    const problem = of(drawn);
    const { size, count, precision, constraints } = problem;
    const start = Uint8Array.from({ length: count }, (_, at) => (drawn.start >> at) & 1);
    const { estimate, held } = projectOntoShape(problem, constraints, start);
    const values = times(constraints.rows, estimate, size);
    for (let at = 0; at < count; at++) {
      expect(values[at]).toBeLessThan(1e-9);
      if (held[at] === 1) expect(Math.abs(values[at])).toBeLessThan(1e-9);
    }
    // Precision x (estimate before - after) = C' m, m >= 0 for the held and 0 for the others: no feasible direction leads nearer.
    const pull = times(precision, Array.from(problem.estimate, (value, k) => value - estimate[k]), size);
    const normal = seededNormal(drawn.seed + 1);
    for (let trial = 0; trial < 40; trial++) {
      const direction = Array.from({ length: size }, normal);
      const isFeasible = Array.from({ length: count }, (_, at) => held[at] === 0 || times(constraints.rows.subarray(at * size, (at + 1) * size), direction, size)[0] <= 0).every(Boolean);
      if (isFeasible) expect(pull.reduce((sum, value, k) => sum + value * direction[k], 0)).toBeLessThan(1e-8);
    }
  }), { numRuns: 300, seed: 7 });
});

it("It is the point that plain projections come to, wherever the search starts from", () => {
  fc.assert(fc.property(problems, (drawn) => {
    const problem = of(drawn);
    const plain = plainProjection(problem);
    for (const first of [0, 255, drawn.start]) {
      const start = Uint8Array.from({ length: problem.count }, (_, at) => (first >> at) & 1);
      const { estimate } = projectOntoShape(problem, problem.constraints, start);
      expect(distance(problem, estimate)).toBeLessThan(distance(problem, plain) * (1 + 1e-7) + 1e-9);
    }
  }), { numRuns: 25, seed: 8 });
});

it("A point that keeps its shape stays where it is", () => {
  const problem = problemOf(3, 5, 3);
  const inside = problem.estimate.map(() => 0);
  const { estimate, held } = projectOntoShape({ ...problem, estimate: inside }, problem.constraints, new Uint8Array(3));
  expect([...estimate]).toEqual([0, 0, 0, 0, 0]);
  expect([...held]).toEqual([0, 0, 0]);
});
