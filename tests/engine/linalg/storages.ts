import fc from "fast-check";
import type { SparseRows, SplineRows } from "@shared/engine/linalg/sparse-rows";

/** Random numbers in [-2, 2), whole sixteenths: sums of products of a few hundred of them are exact. */
const numbers = (count: number) => fc.array(fc.integer({ min: -32, max: 31 }), { minLength: count, maxLength: count })
  .map((values) => Float64Array.from(values, (value) => value / 16));

const indices = (count: number, limit: number) => fc.array(fc.integer({ min: 0, max: limit - 1 }), { minLength: count, maxLength: count })
  .map((values) => Int32Array.from(values));

const spline = (count: number, width: number, wraps: boolean): fc.Arbitrary<SplineRows> =>
  fc.record({ storage: fc.constant("spline" as const), width: fc.constant(width), wraps: fc.constant(wraps), first: indices(count, wraps ? width : width - 3), values: numbers(4 * count) });

/** Rows of every storage, `count` of them. */
export const storages = {
  single: (count: number): fc.Arbitrary<SparseRows> => numbers(count).map((values) => ({ storage: "single", width: 1, values })),
  index: (count: number): fc.Arbitrary<SparseRows> => indices(count, 3).map((index) => ({ storage: "index", width: 3, index, values: null })),
  "index with values": (count: number): fc.Arbitrary<SparseRows> =>
    fc.tuple(indices(count, 4), numbers(count)).map(([index, values]) => ({ storage: "index", width: 4, index, values })),
  spline: (count: number): fc.Arbitrary<SparseRows> => spline(count, 6, false),
  circle: (count: number): fc.Arbitrary<SparseRows> => spline(count, 5, true),
  dense: (count: number): fc.Arbitrary<SparseRows> => numbers(3 * count).map((values) => ({ storage: "dense", width: 3, values })),
  tensor: (count: number): fc.Arbitrary<SparseRows> =>
    fc.tuple(spline(count, 4, false), spline(count, 5, false)).map(([left, right]) => ({ storage: "tensor", width: 20, left, right })),
};

export const weightsOf = (count: number) => numbers(count);

/** The n x width matrix rows stand for, row-major, written from the storage's definition. */
export function denseOf(rows: SparseRows, count: number): Float64Array {
  const { width } = rows;
  const matrix = new Float64Array(count * width);
  for (let row = 0; row < count; row++) {
    if (rows.storage === "single") matrix[row] = rows.values[row];
    else if (rows.storage === "index") matrix[row * width + rows.index[row]] += rows.values?.[row] ?? 1;
    else if (rows.storage === "dense") for (let k = 0; k < width; k++) matrix[row * width + k] = rows.values[row * width + k];
    else if (rows.storage === "spline") {
      for (let k = 0; k < 4; k++) matrix[row * width + (rows.first[row] + k) % width] += rows.values[4 * row + k];
    } else {
      const left = denseOf(rows.left, count);
      const right = denseOf(rows.right, count);
      for (let i = 0; i < rows.left.width; i++) {
        for (let j = 0; j < rows.right.width; j++) {
          matrix[row * width + i * rows.right.width + j] = left[row * rows.left.width + i] * right[row * rows.right.width + j];
        }
      }
    }
  }
  return matrix;
}

/** X'WY of two dense matrices by three plain loops. */
export function plainCrossProduct(left: { matrix: Float64Array; width: number }, right: { matrix: Float64Array; width: number }, weights: Float64Array): Float64Array {
  const out = new Float64Array(left.width * right.width);
  for (let row = 0; row < weights.length; row++) {
    for (let i = 0; i < left.width; i++) {
      for (let j = 0; j < right.width; j++) {
        out[i * right.width + j] += weights[row] * left.matrix[row * left.width + i] * right.matrix[row * right.width + j];
      }
    }
  }
  return out;
}

/** The same numbers with 0 for -0, which are equal here. */
export const unsigned = (values: Float64Array): Float64Array => values.map((value) => value + 0);
