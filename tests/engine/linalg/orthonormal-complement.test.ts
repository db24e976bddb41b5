import fc from "fast-check";
import { expect, it } from "vitest";
import { orthonormalComplement } from "@shared/engine/linalg/orthonormal-complement";

const vector = (size: number) => fc.array(fc.integer({ min: -9, max: 9 }), { minLength: size, maxLength: size }).map((values) => Float64Array.from(values));
const column = (matrix: Float64Array, width: number, k: number) => Array.from({ length: matrix.length / width }, (_, row) => matrix[row * width + k]);
const product = (left: ArrayLike<number>, right: ArrayLike<number>) => Array.from(left).reduce((sum, value, k) => sum + value * right[k], 0);
const sine = ([a, b]: Float64Array[]) => 1 - product(a, b) ** 2 / (product(a, a) * product(b, b));

it("The complement of two vectors has orthonormal columns, all orthogonal to both", () => {
  const pairs = fc.tuple(vector(6), vector(6)).filter((pair) => sine(pair) > 1e-3);
  fc.assert(fc.property(pairs, (vectors) => {
    const complement = orthonormalComplement(vectors, 6);
    expect(complement).toHaveLength(24);
    for (let i = 0; i < 4; i++) {
      const own = column(complement, 4, i);
      for (let j = 0; j <= i; j++) expect(product(own, column(complement, 4, j))).toBeCloseTo(i === j ? 1 : 0, 13);
      for (const given of vectors) expect(Math.abs(product(own, given))).toBeLessThan(1e-12);
    }
  }), { numRuns: 60, seed: 20260105 });
});

it("The complement of none is the identity, and the vectors given stay as they are", () => {
  expect([...orthonormalComplement([], 2)]).toEqual([1, 0, 0, 1]);
  const given = Float64Array.of(3, 4);
  expect([...orthonormalComplement([given], 2)].map(Math.abs)).toEqual([expect.closeTo(0.8, 14), expect.closeTo(0.6, 14)]);
  expect([...given]).toEqual([3, 4]);
});
