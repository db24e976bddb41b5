import { Matrix, solve } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { orthonormalComplement } from "@shared/engine/linalg/orthonormal-complement";
import { packLower, packedIndex, packedQuadratic, sparseVariance, withoutZeros } from "@shared/engine/linalg/packed-symmetric";
import { pivotedLu, solveLu } from "@shared/engine/linalg/pivoted-lu";
import { addProduct, denseProduct, transposed } from "@shared/engine/linalg/dense-product";
import { seededNormal, seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";

const normal = seededNormal(12);
const uniform = seededUniform(13);
const random = (count: number) => Float64Array.from({ length: count }, normal);

describe("Elimination with pivots", () => {
  it.each([1, 3, 8, 21])("of %i equations is ml-matrix's, several right sides at once, the block left as it was", (size) => {
    const matrix = random(size * size);
    const block = random(3 * size);
    const kept = block.slice();
    const plain = solve(Matrix.from1DArray(size, size, matrix), Matrix.from1DArray(size, 3, block)).to1DArray();
    expect(largestDifference(solveLu(pivotedLu(matrix, size), block, 3), plain)).toBeLessThan(1e-10);
    expect(block).toEqual(kept);
  });

  it("takes rows of sizes 300 powers of ten apart", () => {
    const [size, rows] = [4, random(16)];
    const units = [1e-150, 1, 1e150, 1e-80];
    const right = random(size);
    const plain = solveLu(pivotedLu(rows.slice(), size), right, 1);
    const scaled = rows.map((value, at) => value * units[Math.floor(at / size)]);
    expect(largestDifference(solveLu(pivotedLu(scaled, size), right.map((value, row) => value * units[row]), 1), plain)).toBeLessThan(1e-10);
  });

  it("says where a row is made of others, or of nothing, by its smallest pivot", () => {
    const made = Float64Array.of(1, 2, 3, 4, 5, 6, 7, 8, 9);
    expect(pivotedLu(made, 3).smallestPivot).toBeLessThan(1e-15);
    expect(pivotedLu(Float64Array.of(1, 2, 0, 0), 2).smallestPivot).toBe(0);
    expect(pivotedLu(Float64Array.of(Number.NaN), 1).smallestPivot).toBe(0);
    expect(pivotedLu(new Float64Array(0), 0).smallestPivot).toBe(1);
    expect(pivotedLu(Float64Array.of(5, 0, 0, -0.01), 2).smallestPivot).toBe(1);
  });

  it("works in the matrix given", () => {
    const matrix = Float64Array.of(0, 2, 4, 1);
    const { factor, order } = pivotedLu(matrix, 2);
    expect(factor).toBe(matrix);
    expect([...order]).toEqual([1, 0]);
  });
});

describe("A packed symmetric matrix", () => {
  const size = 6;
  const half = random(size * size);
  const square = denseProduct({ values: half, count: size, width: size }, { values: transposed(half, size, size), count: size, width: size });
  const packed = packLower(square, size);

  it("has every entry at its place, whichever comes first", () => {
    for (let row = 0; row < size; row++) for (let column = 0; column < size; column++) expect(packed[packedIndex(row, column)]).toBeCloseTo(square[row * size + column], 12);
    expect(packed).toHaveLength(21);
    expect([...packLower(Float64Array.of(1, 99, 2, 3), 2)]).toEqual([1, 2, 3]);
  });

  it("gives x'Vy by three plain loops, the same either way round", () => {
    for (let turn = 0; turn < 20; turn++) {
      const [left, right] = [random(size), random(size)];
      let plain = 0;
      for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) plain += left[i] * square[i * size + j] * right[j];
      expect(packedQuadratic(packed, left, right)).toBeCloseTo(plain, 10);
      expect(packedQuadratic(packed, right, left)).toBeCloseTo(plain, 10);
    }
    expect(packedQuadratic(new Float64Array(0), new Float64Array(0), new Float64Array(0))).toBe(0);
  });

  it("gives a few entries the variance of the whole vector, in any order, one index twice", () => {
    for (let turn = 0; turn < 40; turn++) {
      const count = 1 + Math.floor(4 * uniform());
      const indices = Int32Array.from({ length: count + 2 }, () => Math.floor(size * uniform()));
      const values = random(count + 2);
      const whole = new Float64Array(size);
      for (let k = 0; k < count; k++) whole[indices[k]] += values[k];
      expect(sparseVariance(packed, indices, values, count)).toBeCloseTo(packedQuadratic(packed, whole, whole), 10);
    }
    expect(sparseVariance(packed, new Int32Array(0), new Float64Array(0), 0)).toBe(0);
  });

  it("gives no variance below zero", () => {
    expect(sparseVariance(Float64Array.of(1, 1, 1 - 1e-15), Int32Array.of(0, 1), Float64Array.of(1, -1), 2)).toBe(0);
    expect(sparseVariance(Float64Array.of(-2), Int32Array.of(0), Float64Array.of(3), 1)).toBe(0);
  });

  it("has zeros moved out of the way, the others in their order", () => {
    const [indices, values] = [Int32Array.of(5, 1, 3, 0, 2), Float64Array.of(0, 2, -0, 1e-300, 7)];
    expect(withoutZeros(indices, values, 4)).toBe(2);
    expect([[...indices.slice(0, 2)], [...values.slice(0, 2)]]).toEqual([[1, 0], [2, 1e-300]]);
    expect(values[4]).toBe(7);
    expect(withoutZeros(indices, values, 0)).toBe(0);
  });
});

describe("Products of blocks", () => {
  it("add to what is there, and let a zero outweigh anything", () => {
    const out = Float64Array.of(10, 20);
    addProduct({ values: Float64Array.of(0, 2), count: 1, width: 2 }, { values: Float64Array.of(Infinity, Number.NaN, 3, 4), count: 2, width: 2 }, -1, out);
    expect([...out]).toEqual([4, 12]);
  });

  it.each([[1, 1, 1], [2, 0, 3], [5, 3, 4], [9, 8, 7]])("of %i x %i and %i columns are ml-matrix's, neither changed", (rows, inner, columns) => {
    const [left, right] = [random(rows * inner), random(inner * columns)];
    const kept = [left.slice(), right.slice()];
    const found = denseProduct({ values: left, count: rows, width: inner }, { values: right, count: inner, width: columns });
    const plain = inner === 0 ? new Array<number>(rows * columns).fill(0) : Matrix.from1DArray(rows, inner, left).mmul(Matrix.from1DArray(inner, columns, right)).to1DArray();
    expect(largestDifference(found, plain)).toBeLessThan(1e-12);
    expect([left, right]).toEqual(kept);
    expect([...transposed(transposed(left, rows, inner), inner, rows)]).toEqual([...left]);
  });
});

describe("The orthonormal complement", () => {
  it.each([[2, 1], [5, 2], [9, 4], [6, 6]])("in %i dimensions of %i vectors is orthonormal, and orthogonal to all of any sign and size", (size, count) => {
    const vectors = Array.from({ length: count }, (_, k) => random(size).map((value) => value * 10 ** (40 * (k - 1))));
    const width = size - count;
    const complement = Matrix.from1DArray(size, width, orthonormalComplement(vectors, size));
    const inner = width === 0 ? [] : complement.transpose().mmul(complement).to1DArray();
    expect(largestDifference(inner, Matrix.eye(width, width).to1DArray())).toBeLessThan(1e-13);
    for (const vector of vectors) {
      const length = Math.hypot(...vector);
      for (let k = 0; k < width; k++) expect(Math.abs(complement.getColumn(k).reduce((sum, value, row) => sum + (value * vector[row]) / length, 0))).toBeLessThan(1e-12);
    }
  });
});
