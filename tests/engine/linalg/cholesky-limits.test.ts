import { CholeskyDecomposition, Matrix, inverse as inverseOf } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { backwardSolve, choleskyInPlace, forwardSolve, invertFactored, logDeterminant } from "@shared/engine/linalg/cholesky";
import { choleskyDropping, ownShareNeeded } from "@shared/engine/linalg/dropping-cholesky";
import { seededNormal } from "../support/generator";
import { largestDifference, largestRelativeDifference } from "../support/measures";
import { lowerPart } from "./matrices";

const normal = seededNormal(77);
const columnsOf = (rows: number, width: number) => Matrix.from1DArray(rows, width, Array.from({ length: rows * width }, normal));
const crossOf = (columns: Matrix) => Float64Array.from(columns.transpose().mmul(columns).to1DArray());

describe("The Cholesky factor", () => {
  it("is ml-matrix's", () => {
    for (const size of [1, 2, 6, 11]) {
      const matrix = crossOf(columnsOf(3 * size, size));
      const factor = matrix.slice();
      choleskyInPlace(factor, size);
      const plain = new CholeskyDecomposition(Matrix.from1DArray(size, size, matrix)).lowerTriangularMatrix.to1DArray();
      expect(largestDifference(lowerPart(factor, size), plain)).toBeLessThan(1e-12);
    }
  });

  it("of no rows is there, with a determinant of one", () => {
    expect(choleskyInPlace(new Float64Array(0), 0)).toBe(true);
    expect(logDeterminant(new Float64Array(0), 0)).toBe(0);
  });

  it.each([1e-150, 1e-8, 1, 1e8, 1e150])("scales with the root of the matrix: times %d", (times) => {
    const matrix = crossOf(columnsOf(12, 4));
    const [factor, scaled] = [matrix, matrix.map((value) => value * times)];
    choleskyInPlace(factor, 4);
    expect(choleskyInPlace(scaled, 4)).toBe(true);
    expect(largestRelativeDifference(lowerPart(scaled, 4).filter((value) => value !== 0), lowerPart(factor, 4).filter((value) => value !== 0).map((value) => value * Math.sqrt(times)))).toBeLessThan(1e-12);
    expect(logDeterminant(scaled, 4) - logDeterminant(factor, 4)).toBeCloseTo(4 * Math.log(times), 9);
  });

  it("leaves what is above the diagonal, and solving leaves the factor", () => {
    const factor = Float64Array.of(4, 91, 2, 5);
    choleskyInPlace(factor, 2);
    expect([...factor]).toEqual([2, 91, 1, 2]);
    const vector = Float64Array.of(2, 5);
    forwardSolve(factor, 2, vector);
    expect([...vector]).toEqual([1, 2]);
    backwardSolve(factor, 2, vector);
    expect([...vector]).toEqual([0, 1]);
    expect([...factor]).toEqual([2, 91, 1, 2]);
  });

  it("becomes its own inverse when the matrix is inverted, both triangles of which are given", () => {
    const matrix = crossOf(columnsOf(20, 5));
    const factor = matrix.slice();
    choleskyInPlace(factor, 5);
    const lower = Matrix.from1DArray(5, 5, lowerPart(factor, 5));
    const inverse = new Float64Array(25);
    invertFactored(factor, 5, inverse);
    expect(largestDifference(lowerPart(factor, 5), inverseOf(lower).to1DArray())).toBeLessThan(1e-12);
    expect(largestDifference(inverse, inverseOf(Matrix.from1DArray(5, 5, matrix)).to1DArray())).toBeLessThan(1e-12);
    for (let row = 0; row < 5; row++) for (let column = 0; column < row; column++) expect(inverse[row * 5 + column]).toBe(inverse[column * 5 + row]);
  });
});

describe("Pivots below the least given", () => {
  /** Second column twice the first: the second pivot is zero but for rounding. */
  const singular = () => Float64Array.of(1, 0, 0, 2, 4, 0, 0, 0, 9);

  it("fail without one, and are raised to it with one, its root on the diagonal", () => {
    expect(choleskyInPlace(singular(), 3)).toBe(false);
    const factor = singular();
    expect(choleskyInPlace(factor, 3, Float64Array.of(0, 0.25))).toBe(true);
    expect([...lowerPart(factor, 3)]).toEqual([1, 0, 0, 2, 0.5, 0, 0, 0, 3]);
  });

  it("below zero by rounding are raised too", () => {
    const factor = Float64Array.of(1, 0, 2, 4 - 1e-15);
    expect(choleskyInPlace(factor, 2, Float64Array.of(0, 1e-11))).toBe(true);
    expect(factor[3]).toBeCloseTo(Math.sqrt(1e-11), 12);
  });

  it("hold for the first rows only, and leave larger pivots as they are", () => {
    const matrix = crossOf(columnsOf(9, 3));
    const [plain, floored] = [matrix.slice(), matrix.slice()];
    choleskyInPlace(plain, 3);
    const least = Float64Array.of(1e-6, 1e-6, 1e-6);
    choleskyInPlace(floored, 3, least);
    expect(floored).toEqual(plain);
    expect([...least]).toEqual([1e-6, 1e-6, 1e-6]);
    expect(choleskyInPlace(Float64Array.of(1, 0, 0, 0, 1, 0, 1, 0, 1), 3, Float64Array.of(1, 1))).toBe(false);
  });

  it("do not save a matrix whose pivot is no number", () => {
    expect(choleskyInPlace(Float64Array.of(1, 0, Number.NaN, 1), 2, Float64Array.of(1, 1))).toBe(false);
  });
});

describe("The factorisation that drops columns", () => {
  it("draws the line at its share of a column's sum of squares, whatever the unit", () => {
    for (const unit of [1e-20, 1, 1e20]) {
      const matrix = (share: number) => Float64Array.of(1, 0, unit, unit * unit * (1 + share));
      expect(choleskyDropping(matrix(ownShareNeeded / 2), 2, null)).toEqual([{ column: 1, dependsOn: [0] }]);
      expect(choleskyDropping(matrix(2 * ownShareNeeded), 2, null)).toEqual([]);
    }
  });

  it("tells a column apart that has a ten thousand millionth of its squares to itself, and not one with a hundredth of that", () => {
    expect(choleskyDropping(Float64Array.of(1, 0, 1, 1 + 1e-10), 2, null)).toEqual([]);
    expect(choleskyDropping(Float64Array.of(1, 0, 1, 1 + 1e-12), 2, null)).toEqual([{ column: 1, dependsOn: [0] }]);
  });

  it("names the columns that have a part in one that goes, and no dropped one among them", () => {
    const columns = columnsOf(30, 3);
    const [a, b, c] = [0, 1, 2].map((k) => columns.getColumn(k));
    const all = new Matrix([a, a.map((value) => 3 * value), b, b.map((value, row) => value - 2 * a[row]), c, c.map((value, row) => value + b[row] - a[row])]).transpose();
    expect(choleskyDropping(crossOf(all), 6, null)).toEqual([
      { column: 1, dependsOn: [0] }, { column: 3, dependsOn: [0, 2] }, { column: 5, dependsOn: [0, 2, 4] },
    ]);
  });

  it("solves for what is kept as if the others had never been there", () => {
    const columns = columnsOf(25, 3);
    const all = new Matrix([0, 1, 0, 2].map((k, at) => columns.getColumn(k).map((value) => (at === 2 ? -value : value)))).transpose();
    const factor = crossOf(all);
    choleskyDropping(factor, 4, null);
    const right = Float64Array.of(1, -2, 0, 0.5);
    forwardSolve(factor, 4, right);
    backwardSolve(factor, 4, right);
    const plain = inverseOf(Matrix.from1DArray(3, 3, crossOf(columns))).mmul(Matrix.columnVector([1, -2, 0.5])).to1DArray();
    expect(largestDifference([right[0], right[1], right[3]], plain)).toBeLessThan(1e-12);
    expect(right[2]).toBe(0);
  });

  it("does not decide anew where columns are known: it keeps what is nearly gone, at the least share", () => {
    const factor = Float64Array.of(1, 0, 1, 1);
    expect(choleskyDropping(factor, 2, [])).toEqual([]);
    expect(factor[3]).toBeCloseTo(Math.sqrt(ownShareNeeded), 12);
  });
});
