import { addProduct, denseProduct, transposed } from "@shared/engine/linalg/dense-product";
import { pivotedLu, solveLu } from "@shared/engine/linalg/pivoted-lu";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";

const normals = (seed: number, count: number): Float64Array => Float64Array.from({ length: count }, seededNormal(seed));

/** Row by row, as the definition has it. */
function plainProduct(left: Float64Array, right: Float64Array, [rows, inner, columns]: [number, number, number]): Float64Array {
  return Float64Array.from({ length: rows * columns }, (_, at) => {
    let sum = 0;
    for (let k = 0; k < inner; k++) sum += left[Math.floor(at / columns) * inner + k] * right[k * columns + (at % columns)];
    return sum;
  });
}

describe("Elimination with pivots", () => {
  it.each([1, 2, 5, 13, 40])("solves %i equations to 1e-10", (size) => {
    const matrix = normals(size, size * size);
    const solution = normals(size + 100, 3 * size);
    const right = plainProduct(matrix, solution, [size, size, 3]);
    expect(largestDifference(solveLu(pivotedLu(matrix.slice(), size), right, 3), solution)).toBeLessThan(1e-10);
  });

  it("takes rows of any unit", () => {
    const matrix = Float64Array.of(1e-9, 2e-9, 3e12, 4e12);
    const { smallestPivot } = pivotedLu(matrix.slice(), 2);
    expect(smallestPivot).toBeCloseTo(1 / 3, 1);
    expect(largestDifference(solveLu(pivotedLu(matrix.slice(), 2), Float64Array.of(5e-9, 11e12), 1), [1, 2])).toBeLessThan(1e-12);
  });

  it("exchanges rows where the first pivot is zero", () => {
    expect(Array.from(solveLu(pivotedLu(Float64Array.of(0, 2, 4, 0), 2), Float64Array.of(2, 4), 1))).toEqual([1, 1]);
  });

  it("tells a singular matrix by its smallest pivot", () => {
    expect(pivotedLu(Float64Array.of(1, 2, 2, 4), 2).smallestPivot).toBe(0);
    expect(pivotedLu(new Float64Array(4), 2).smallestPivot).toBe(0);
    expect(pivotedLu(Float64Array.of(1, 2, 3, 2, 4, 6.1, 1, 0, 1), 3).smallestPivot).toBeGreaterThan(1e-3);
    expect(pivotedLu(new Float64Array(0), 0).smallestPivot).toBe(1);
  });
});

describe("Products of blocks are what their definition says, to 1e-13 of their size", () => {
  it.each<[number, number, number]>([[1, 1, 1], [3, 4, 5], [8, 2, 9], [17, 13, 6]])("%i x %i times %i columns", (rows, inner, columns) => {
    const left = normals(rows, rows * inner).map((value, k) => (k % 3 === 0 ? 0 : value));
    const right = normals(columns + 50, inner * columns);
    const reference = plainProduct(left, right, [rows, inner, columns]);
    const blocks = [{ values: left, count: rows, width: inner }, { values: right, count: inner, width: columns }] as const;
    expect(largestDifference(denseProduct(...blocks), reference)).toBeLessThan(1e-12);
    const out = new Float64Array(rows * columns).fill(2);
    addProduct(...blocks, -0.5, out);
    expect(largestDifference(out, reference.map((value) => 2 - value / 2))).toBeLessThan(1e-12);
  });

  it("rows become columns", () => {
    expect(Array.from(transposed(Float64Array.of(1, 2, 3, 4, 5, 6), 2, 3))).toEqual([1, 4, 2, 5, 3, 6]);
  });
});
