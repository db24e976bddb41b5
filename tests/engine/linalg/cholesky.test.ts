import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { backwardSolve, choleskyInPlace, forwardSolve, invertFactored, logDeterminant } from "@shared/engine/linalg/cholesky";
import { choleskyDropping } from "@shared/engine/linalg/dropping-cholesky";
import { largestDifference } from "../support/measures";
import { lowerPart, matrixOf, positiveDefinite, times, transposed } from "./matrices";

const runs = { numRuns: 40, seed: 20260107 };
const sizes = [1, 2, 3, 4, 5, 7, 9];
const square = (size: number) => ({ rows: size, inner: size, columns: size });
/** Entries are below 4 x size + 1, eigenvalues at least 1: rounding stays far below. */
const tolerance = 1e-10;

describe.each(sizes)("The Cholesky factor of a matrix of %i rows", (size) => {
  it("times its transpose is the matrix, read from the lower triangle alone", () => {
    fc.assert(fc.property(positiveDefinite(size), (matrix) => {
      const factor = matrix.map((value, at) => (at % size > Math.floor(at / size) ? 99 : value));
      expect(choleskyInPlace(factor, size)).toBe(true);
      const lower = lowerPart(factor, size);
      expect(largestDifference(times(lower, transposed(lower, size, size), square(size)), matrix)).toBeLessThan(tolerance);
    }), runs);
  });

  it("solves, inverts and gives the log-determinant", () => {
    fc.assert(fc.property(positiveDefinite(size), matrixOf(size, 1), (matrix, wanted) => {
      const factor = matrix.slice();
      choleskyInPlace(factor, size);
      const logarithm = logDeterminant(factor, size);
      const solution = times(matrix, wanted, { rows: size, inner: size, columns: 1 });
      forwardSolve(factor, size, solution);
      backwardSolve(factor, size, solution);
      expect(largestDifference(solution, wanted)).toBeLessThan(tolerance);
      const inverse = new Float64Array(size * size);
      invertFactored(factor, size, inverse);
      const whole = inverse.map((_, at) => {
        const [row, column] = [Math.floor(at / size), at % size];
        return inverse[Math.max(row, column) * size + Math.min(row, column)];
      });
      const unit = Float64Array.from({ length: size * size }, (_, at) => Number(at % (size + 1) === 0));
      expect(largestDifference(times(matrix, whole, square(size)), unit)).toBeLessThan(tolerance);
      expect(logarithm).toBeCloseTo(Math.log(determinant(matrix, size)), 9);
    }), runs);
  });
});

/** By expansion along the first row. */
function determinant(matrix: Float64Array, size: number): number {
  const rows = Array.from({ length: size }, (_, row) => Array.from(matrix.subarray(row * size, (row + 1) * size)));
  let product = 1;
  for (let k = 0; k < size; k++) {
    const pivot = rows.slice(k).reduce((best, row, at) => (Math.abs(row[k]) > Math.abs(rows[best][k]) ? at + k : best), k);
    if (pivot !== k) {
      [rows[k], rows[pivot]] = [rows[pivot], rows[k]];
      product = -product;
    }
    product *= rows[k][k];
    for (let row = k + 1; row < size; row++) {
      const share = rows[row][k] / rows[k][k];
      for (let column = k; column < size; column++) rows[row][column] -= share * rows[k][column];
    }
  }
  return product;
}

describe("A matrix that is not positive definite", () => {
  it("has no factor", () => {
    expect(choleskyInPlace(Float64Array.of(1, 0, 2, 1), 2)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(0), 1)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(Number.NaN), 1)).toBe(false);
  });
});

describe("The factorisation that leaves out columns earlier ones reproduce", () => {
  /** Cross-products of columns given by rows. */
  const crossProducts = (rows: number[][]) => {
    const width = rows[0].length;
    const flat = Float64Array.from(rows.flat());
    return times(transposed(flat, rows.length, width), flat, { rows: width, inner: rows.length, columns: width });
  };

  it("names a sum of two columns and the two, and leaves the identity in its place", () => {
    const matrix = crossProducts([[1, 0, 1, 2], [1, 1, 2, 0], [0, 2, 2, 1], [3, 1, 4, 1]]);
    expect(choleskyDropping(matrix, 4, null)).toEqual([{ column: 2, dependsOn: [0, 1] }]);
    expect([...matrix.subarray(8, 11)]).toEqual([0, 0, 1]);
    expect(matrix[14]).toBe(0);
  });

  it("keeps independent columns, with the factor of the plain one", () => {
    fc.assert(fc.property(positiveDefinite(5), (matrix) => {
      const plain = matrix.slice();
      choleskyInPlace(plain, 5);
      const own = matrix.slice();
      expect(choleskyDropping(own, 5, null)).toEqual([]);
      expect(largestDifference(lowerPart(own, 5), lowerPart(plain, 5))).toBeLessThan(tolerance);
    }), runs);
  });

  it("drops a column of zeros, of which no other has a share", () => {
    expect(choleskyDropping(crossProducts([[1, 0], [2, 0]]), 2, null)).toEqual([{ column: 1, dependsOn: [] }]);
  });

  it("drops what an earlier call dropped and nothing else", () => {
    const known = [{ column: 1, dependsOn: [0] }];
    const matrix = crossProducts([[1, 0, 1], [0, 1, 1], [2, 1, 0]]);
    expect(choleskyDropping(matrix, 3, known)).toEqual(known);
    expect([...matrix.subarray(3, 5)]).toEqual([0, 1]);
  });
});
