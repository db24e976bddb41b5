import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { stridedProduct } from "@shared/engine/linalg/strided-product";
import { lowerPart, matrixOf, times, transposed } from "./matrices";
import { unsigned } from "./storages";

/** Values are whole sixteenths, so sums are exact in any order and no tolerance is needed. */
const runs = { numRuns: 25, seed: 20260109 };
const shapes = [[1, 1, 1], [2, 3, 2], [3, 2, 5], [4, 7, 3], [5, 1, 4], [8, 6, 7]] as const;

describe.each(shapes)("The product of %i x %i and as many x %i", (rows, inner, columns) => {
  const plain = (left: Float64Array, right: Float64Array) => times(left, right, { rows, inner, columns });

  it("is that of three plain loops, read and written within larger arrays", () => {
    fc.assert(fc.property(matrixOf(rows, inner), matrixOf(inner, columns), (left, right) => {
      const before = Float64Array.of(5, 6, 7);
      const out = new Float64Array(3 + rows * columns + 1).fill(9);
      stridedProduct(
        { values: Float64Array.of(...before, ...left), at: 3, rows, inner, rowStep: inner, innerStep: 1 },
        { values: Float64Array.of(8, ...right), at: 1, columns }, { values: out, at: 3, lowerOnly: false },
      );
      expect(unsigned(out)).toEqual(unsigned(Float64Array.of(9, 9, 9, ...plain(left, right), 9)));
    }), runs);
  });

  it("takes the left one's transpose by its steps", () => {
    fc.assert(fc.property(matrixOf(rows, inner), matrixOf(inner, columns), (left, right) => {
      const out = new Float64Array(rows * columns);
      const turned = { values: transposed(left, rows, inner), at: 0, rows, inner, rowStep: 1, innerStep: rows };
      stridedProduct(turned, { values: right, at: 0, columns }, { values: out, at: 0, lowerOnly: false });
      expect(unsigned(out)).toEqual(unsigned(plain(left, right)));
    }), runs);
  });

  it("of a matrix and its own transpose is known by its lower triangle", () => {
    fc.assert(fc.property(matrixOf(rows, inner), (left) => {
      const out = new Float64Array(rows * rows);
      const own = { values: left, at: 0, rows, inner, rowStep: inner, innerStep: 1 };
      stridedProduct(own, { values: transposed(left, rows, inner), at: 0, columns: rows }, { values: out, at: 0, lowerOnly: true });
      const product = times(left, transposed(left, rows, inner), { rows, inner, columns: rows });
      expect(unsigned(lowerPart(out, rows))).toEqual(unsigned(lowerPart(product, rows)));
    }), runs);
  });
});
