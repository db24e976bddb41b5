import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { rowProducts, squareOfLower, subtractSquare } from "@shared/engine/linalg/tiles";
import { packLower, packedIndex, packedQuadratic, sparseVariance } from "@shared/engine/linalg/packed-symmetric";
import { lowerPart, matrixOf, times, transposed } from "./matrices";
import { unsigned } from "./storages";

/** Values are whole sixteenths, so sums are exact in any order and no tolerance is needed. */
const runs = { numRuns: 25, seed: 20260108 };
const shapes = [[1, 1], [3, 2], [2, 4], [5, 5], [4, 8], [7, 9], [6, 11]] as const;

describe.each(shapes)("Products of %i rows by %i columns", (count, width) => {
  it("taken off a square are those of three plain loops, in its lower triangle", () => {
    fc.assert(fc.property(matrixOf(count, width), matrixOf(width, width), (values, before) => {
      const out = before.slice();
      subtractSquare({ values, count, width }, out);
      const product = times(transposed(values, count, width), values, { rows: width, inner: count, columns: width });
      expect(unsigned(lowerPart(out, width))).toEqual(unsigned(lowerPart(before.map((value, at) => value - product[at]), width)));
    }), runs);
  });

  it("row by row with other rows are those of three plain loops", () => {
    const others = 6;
    fc.assert(fc.property(matrixOf(count, width), matrixOf(others, width), (left, right) => {
      const out = new Float64Array(count * others).fill(7);
      rowProducts({ values: left, count, width }, { values: right, count: others, width }, out);
      expect(unsigned(out)).toEqual(unsigned(times(left, transposed(right, others, width), { rows: count, inner: width, columns: others })));
    }), runs);
  });

  it("row by row with themselves are known by their lower triangle", () => {
    fc.assert(fc.property(matrixOf(count, width), (values) => {
      const out = new Float64Array(count * count).fill(7);
      rowProducts({ values, count, width }, { values, count, width }, out, true);
      const product = times(values, transposed(values, count, width), { rows: count, inner: width, columns: count });
      expect(unsigned(lowerPart(out, count))).toEqual(unsigned(lowerPart(product, count)));
    }), runs);
  });

  it("of a lower triangle's transpose with it are those of three plain loops", () => {
    fc.assert(fc.property(matrixOf(width, width), (matrix) => {
      const lower = lowerPart(matrix, width);
      const out = new Float64Array(width * width).fill(7);
      squareOfLower(lower, width, out);
      const product = times(transposed(lower, width, width), lower, { rows: width, inner: width, columns: width });
      expect(unsigned(out)).toEqual(unsigned(product));
    }), runs);
  });
});

describe("A packed symmetric matrix", () => {
  const size = 5;
  const symmetric = matrixOf(size, size).map((matrix) => {
    const other = transposed(matrix, size, size);
    return matrix.map((value, at) => value + other[at]);
  });

  it("has each entry at its index, either way round", () => {
    fc.assert(fc.property(symmetric, (matrix) => {
      const packed = packLower(matrix, size);
      expect(packed).toHaveLength(15);
      for (let row = 0; row < size; row++) {
        for (let column = 0; column < size; column++) expect(packed[packedIndex(row, column)]).toBe(matrix[row * size + column]);
      }
    }), runs);
  });

  it("gives the products of two vectors around it", () => {
    fc.assert(fc.property(symmetric, matrixOf(size, 1), matrixOf(size, 1), (matrix, left, right) => {
      const [expected] = times(times(left, matrix, { rows: 1, inner: size, columns: size }), right, { rows: 1, inner: size, columns: 1 });
      expect(packedQuadratic(packLower(matrix, size), left, right) + 0).toBe(expected + 0);
    }), runs);
  });

  it("gives the variance of a few entries, and zero for what rounding made negative", () => {
    fc.assert(fc.property(symmetric, matrixOf(3, 1), (matrix, values) => {
      const vector = new Float64Array(size);
      const indices = Int32Array.of(4, 0, 2);
      indices.forEach((index, k) => { vector[index] = values[k]; });
      const packed = packLower(matrix, size);
      expect(sparseVariance(packed, indices, values, 3)).toBe(Math.max(0, packedQuadratic(packed, vector, vector)));
    }), runs);
  });
});
