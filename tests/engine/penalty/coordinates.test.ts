import { EigenvalueDecomposition, Matrix, SingularValueDecomposition } from "ml-matrix";
import { describe, expect, it } from "vitest";
import type { TermBasis, TermSpec } from "@shared/engine";
import { learnBasis } from "@shared/engine/basis/term-basis";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { driverRows, learn, transformMatrix } from "../basis/term-values";
import { largestDifference } from "../support/measures";

const data = driverRows(8);

/** D'D of differences of an order on `size` coefficients, on a circle wrapped round; written from the definition. */
function differences(size: number, order: 1 | 2, wraps = false): Matrix {
  const weights = order === 1 ? [-1, 1] : [1, -2, 1];
  const rows = Array.from({ length: wraps ? size : size - order }, (_, row) => {
    const difference = new Array<number>(size).fill(0);
    weights.forEach((weight, k) => { difference[(row + k) % size] = weight; });
    return difference;
  });
  const matrix = new Matrix(rows);
  return matrix.transpose().mmul(matrix);
}

const zeros = (size: number) => Matrix.zeros(size, size);
const kronecker = (left: Matrix, right: Matrix) => left.kroneckerProduct(right);
/** A penalty on one level's (or group's) coefficients out of several. */
const onLevel = (level: number, count: number, penalty: Matrix) => kronecker(Matrix.diag(Array.from({ length: count }, (_, k) => Number(k === level))), penalty);

function matrixOf(basis: TermBasis): Matrix {
  const { transform, rawWidth } = termCoordinates(basis);
  const { matrix, width } = transformMatrix(transform, rawWidth);
  return Matrix.from1DArray(rawWidth, width, matrix);
}

/** Positions of the unpenalised columns of a transform, then of the penalised, as `TermTransform` lays them out. */
function columnOrder(basis: TermBasis): number[] {
  const { transform, unpenalised, penalised } = termCoordinates(basis);
  const all = Array.from({ length: unpenalised + penalised }, (_, k) => k);
  if (transform.form !== "blocks") return all;
  const isUnpenalised = (column: number) => column % transform.columns < transform.unpenalised;
  return [...all.filter(isUnpenalised), ...all.filter((column) => !isUnpenalised(column))];
}

/** What each penalty is in coordinates by its shape, as a diagonal over all coordinates, unpenalised first. */
function declaredDiagonals(basis: TermBasis): Float64Array[] {
  const { unpenalised, penalised, penalties } = termCoordinates(basis);
  return penalties.map(({ start, end, diagonal }) => {
    const declared = new Float64Array(unpenalised + penalised);
    for (let k = start; k < end; k++) declared[unpenalised + k] = diagonal?.[k - start] ?? 1;
    return declared;
  });
}

const identity = (size: number) => Matrix.eye(size, size);
const cases: { name: string; term: TermSpec; raw: Matrix[] }[] = [
  { name: "a smooth", term: { kind: "smooth", column: "price", size: 9 }, raw: [differences(9, 2)] },
  { name: "a circle", term: { kind: "cyclic-smooth", column: "price", period: [0, 4], size: 8 }, raw: [differences(8, 2, true)] },
  { name: "a smooth times a number", term: { kind: "smooth", column: "price", size: 7, by: "temperature" }, raw: [differences(7, 2)] },
  {
    name: "a smooth per level", term: { kind: "smooth", column: "price", size: 6, by: "store" },
    raw: [0, 1, 2, 3].map((level) => onLevel(level, 4, differences(6, 2))),
  },
  { name: "a random walk", term: { kind: "random-walk", column: "week" }, raw: [differences(34, 1)] },
];

describe.each(cases)("The coordinates of $name", ({ term, raw }) => {
  const { basis } = learnBasis(term, data);
  const transform = matrixOf(basis);
  const order = columnOrder(basis);

  it("turn every difference penalty into the diagonal declared: zero on the unpenalised, one on its own", () => {
    const declared = declaredDiagonals(basis);
    expect(declared).toHaveLength(raw.length);
    raw.forEach((penalty, j) => {
      const inCoordinates = transform.transpose().mmul(penalty).mmul(transform);
      const expected = zeros(order.length);
      order.forEach((column, k) => expected.set(column, column, declared[j][k]));
      // Rounding of eigenvectors over the root of the smallest eigenvalue, 0.004 here.
      expect(largestDifference(inCoordinates.to1DArray(), expected.to1DArray())).toBeLessThan(1e-10);
    });
  });

  it("are as many as curves without their constants (a smooth times a number keeps its own)", () => {
    const { unpenalised, penalised, rawWidth, grouped } = termCoordinates(basis);
    const constants = basis.kind === "scaled-smooth" ? 0 : basis.kind === "levelled-smooth" ? 4 : 1;
    expect(unpenalised + penalised).toBe(rawWidth - constants);
    expect(grouped).toBe(false);
    const singular = new SingularValueDecomposition(transform).diagonal;
    expect(Math.min(...singular)).toBeGreaterThan(0.05);
  });
});

describe("The coordinates of a random walk", () => {
  it("are the cosines of the path's Laplacian: orthogonal to each other and to the constant", () => {
    const { basis } = learnBasis({ kind: "random-walk", column: "week" }, data);
    const transform = matrixOf(basis);
    const square = transform.transpose().mmul(transform);
    const sums = Matrix.ones(1, transform.rows).mmul(transform);
    const eigenvalues = new EigenvalueDecomposition(differences(34, 1), { assumeSymmetric: true }).realEigenvalues.slice(1);
    expect(largestDifference(square.to1DArray(), Matrix.diag(eigenvalues.map((value) => 1 / value)).to1DArray())).toBeLessThan(1e-9);
    expect(Math.max(...sums.to1DArray().map(Math.abs))).toBeLessThan(1e-10);
  });
});

describe("The coordinates of a tensor product", () => {
  const sizes: [number, number] = [5, 7];
  const { basis } = learn("tensor-product", { kind: "tensor-product", columns: ["price", "temperature"], sizes }, data);
  const { penalties, unpenalised, penalised } = termCoordinates(basis);
  const transform = matrixOf(basis);

  it("have penalties diagonal in one basis, of the margins' eigenvalues: line times line has neither", () => {
    expect([unpenalised, penalised]).toEqual([1, 23]);
    const [first, second] = penalties.map(({ diagonal }) => [0, ...diagonal!]);
    const perMargin = (values: number[]) => [...new Set(values.map((value) => value.toPrecision(9)))].length;
    expect([perMargin(first), perMargin(second)]).toEqual([4, 6]);
    first.forEach((value, k) => {
      expect(value === 0).toBe(k < 6);
      expect(second[k] === 0).toBe(k % 6 === 0);
    });
  });

  it("have in the value parametrisation the penalty of margin 1 times the identity, and the identity times that of margin 2", () => {
    // Turning back: values at the points = V_m x coordinates with V_m orthogonal, so products of coordinates' penalties are the same.
    const margins = basis.margins.map((margin, m) => valueParametrisation(margin.centring, basis.ranges[m], margin.size, { margin }));
    const [one, two] = margins;
    const joint = kronecker(one.penalty, identity(6));
    const other = kronecker(identity(4), two.penalty);
    const eigen = (matrix: Matrix) => new EigenvalueDecomposition(matrix, { assumeSymmetric: true }).realEigenvalues;
    const sorted = (values: ArrayLike<number>) => Float64Array.from(values).sort();
    const largest = Math.max(...eigen(joint), ...eigen(other));
    for (const [weight1, weight2] of [[1, 0], [0, 1], [0.3, 2]]) {
      const expected = sorted(eigen(Matrix.add(Matrix.mul(joint, weight1), Matrix.mul(other, weight2))));
      const own = sorted([0, ...penalties[0].diagonal!.map((value, k) => weight1 * value + weight2 * penalties[1].diagonal![k])]);
      expect(largestDifference(own, expected) / largest).toBeLessThan(1e-12);
    }
  });

  it("reach every product of centred margins", () => {
    expect(new SingularValueDecomposition(transform).rank).toBe(24);
  });
});

/** A margin's penalty when coefficients are the curve's values at evenly spaced points, made from the definition. */
function valueParametrisation(
  centring: Float64Array, range: [number, number], size: number, of: { margin: Extract<TermBasis, { kind: "smooth" }> },
): { penalty: Matrix } {
  const points = Array.from({ length: size - 1 }, (_, k) => range[0] + ((range[1] - range[0]) * k) / (size - 2));
  const step = (of.margin.upper - of.margin.lower) / (size - 3);
  const spline = (x: number, k: number) => {
    const u = Math.abs((x - of.margin.lower) / step - (k - 1));
    return u >= 2 ? 0 : u >= 1 ? (2 - u) ** 3 / 6 : 2 / 3 - u * u + u ** 3 / 2;
  };
  const conditions = new Matrix([...points.map((x) => Array.from({ length: size }, (_, k) => spline(x, k))), Array.from(centring)]);
  const byValues = new SingularValueDecomposition(conditions, { autoTranspose: true }).inverse().subMatrix(0, size - 1, 0, size - 2);
  return { penalty: byValues.transpose().mmul(differences(size, 2)).mmul(byValues) };
}
