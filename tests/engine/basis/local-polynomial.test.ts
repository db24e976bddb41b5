import { Matrix, solve } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { fitModel, predict, termCurve } from "@shared/engine";
import type { LocalRegressionBasis, ModelSpec } from "@shared/engine";
import { localRows, localSlopeRows, windowAt } from "@shared/engine/basis/local-rows";
import { seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";

const basisOf = (at: readonly number[], change: Partial<LocalRegressionBasis> = {}): LocalRegressionBasis => ({
  kind: "local-regression", column: "price", log: false, neighbours: at.length, degree: 2,
  at: Float64Array.from(at), rows: new Float64Array(at.length).fill(1), weights: new Float64Array(at.length).fill(1),
  centring: new Float64Array(at.length), ...change,
});

const uniform = seededUniform(31);
const scattered = Array.from({ length: 15 }, () => 1 + uniform()).sort((left, right) => left - right);
const weights = Float64Array.from(scattered, () => 0.2 + 3 * uniform());

/** Value and slope at x of the polynomial by the normal equations of the plain powers of x_k - x. */
function plainLocal(basis: LocalRegressionBasis, x: number): { value: number[]; slope: number[] } {
  const { reach } = windowAt(basis, x);
  const kernel = Array.from(basis.at, (point, k) => basis.weights[k] * Math.max(0, 1 - (Math.abs(point - x) / reach) ** 3) ** 3);
  const powers = new Matrix(Array.from(basis.at, (point) => Array.from({ length: basis.degree + 1 }, (_, power) => (point - x) ** power)));
  const weighted = new Matrix(powers.to2DArray().map((row, k) => row.map((value) => value * kernel[k])));
  const rows = solve(weighted.transpose().mmul(powers), weighted.transpose());
  return { value: rows.getRow(0), slope: basis.degree === 0 ? rows.getRow(0).map(() => 0) : rows.getRow(1) };
}

describe("local polynomials are the weighted least squares of plain powers", () => {
  const places = [scattered[0], 1.1, 1.37, 1.5, scattered[8], 1.93, scattered[14]];
  it.each([0, 1, 2].flatMap((degree) => [6, 11, 15].map((neighbours) => ({ degree, neighbours }))))(
    "in value and slope: degree $degree, $neighbours neighbours", ({ degree, neighbours }) => {
      const basis = basisOf(scattered, { degree, neighbours, weights });
      for (const x of places) {
        const plain = plainLocal(basis, x);
        expect(largestDifference(localRows(basis, Float64Array.of(x)).values, plain.value)).toBeLessThan(1e-10);
        expect(largestDifference(localSlopeRows(basis, Float64Array.of(x)).values, plain.slope)).toBeLessThan(1e-8);
      }
    });

  it("shifts and scales with the column: values stay, slopes go by the unit", () => {
    const basis = basisOf(scattered, { weights, neighbours: 9 });
    const moved = basisOf(scattered.map((value) => 1e6 * (value - 1)), { weights, neighbours: 9 });
    const at = Float64Array.from(places);
    expect(largestDifference(localRows(moved, at.map((value) => 1e6 * (value - 1))).values, localRows(basis, at).values)).toBeLessThan(1e-9);
    const slopes = localSlopeRows(moved, at.map((value) => 1e6 * (value - 1))).values.map((value) => 1e6 * value);
    expect(largestDifference(slopes, localSlopeRows(basis, at).values)).toBeLessThan(1e-8);
  });
});

/** Columns whose points lie as unevenly as they come. */
const uneven: Record<string, number[]> = {
  "one value a billion away": [0, 0.6, 1.4, 2.2, 3.4, 4, 4.9, 1e9],
  "the near ones all but one": [0, 1e-7, 2e-7, 3e-7, 1, 2, 3, 4],
  "two heaps": [1, 1.0001, 1.0002, 1.0003, 9, 9.0001, 9.0002, 9.0003],
  "by powers of ten": [1e-4, 1e-3, 1e-2, 0.1, 1, 10, 100, 1000],
  "heaps of one value for rounding": [0, 5e-324, 1e-300, 0.1, 0.3, 0.6, 0.8, 1],
};

describe.each(Object.entries(uneven))("however uneven the points are: %s", (_name, at) => {
  const bases = [0, 1, 2].flatMap((degree) => [4, 6, 8].map((neighbours) => basisOf(at, { degree, neighbours })));

  it("values sum to one and slopes to zero, to rounding of their sizes", () => {
    for (const basis of bases) {
      const { values, width } = localRows(basis, basis.at);
      const slopes = localSlopeRows(basis, basis.at).values;
      at.forEach((_value, row) => {
        const own = values.subarray(row * width, (row + 1) * width);
        const steep = slopes.subarray(row * width, (row + 1) * width);
        const size = (list: Float64Array) => list.reduce((sum, value) => sum + Math.abs(value), 0);
        expect(Math.abs(own.reduce((sum, value) => sum + value, 0) - 1)).toBeLessThan(1e-14 * size(own) * width);
        expect(Math.abs(steep.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-13 * size(steep) * width + 1e-300);
      });
    }
  });

  it.each(["gaussian", "quasi-poisson"] as const)("a model's fitted values are its predictions of the same rows: %s", (family) => {
    const few = at.map((_value, row) => (row * 7) % 4);
    const data = { awkward: [...at, ...at], few: [...few, ...few.map((value) => 3 - value)], y: [...at, ...at].map((_value, row) => 1 + ((row * row) % 5)) };
    for (const degree of [0, 1, 2] as const) {
      const spec: ModelSpec = { response: "y", family, terms: [{ kind: "linear", column: "few" }, { kind: "local-regression", column: "awkward", span: 0.6, degree }] };
      const model = fitModel(spec, data);
      expect(largestDifference(predict(model, data).mean, model.fitted)).toBeLessThan(1e-8);
      expect(Math.abs(termCurve(model, "awkward", { at: data.awkward }).estimate.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-8);
    }
  });
});

describe("a window with too few different values lowers the degree", () => {
  it.each([
    { name: "two heaps give a line", at: [1, 1 + 2e-13, 2, 2 + 2e-13], degree: 2, same: 1 },
    { name: "two values give a line", at: [1, 2, 3], degree: 2, same: 1 },
    { name: "one heap far from x gives a mean", at: [1, 2, 2 + 4e-16, 3], degree: 1, same: 0 },
  ])("$name", ({ at, degree, same }) => {
    const x = Float64Array.of(same === 0 ? 1.5 : (at[0] + at[1]) / 2);
    const neighbours = same === 0 ? 4 : at.length;
    const rows = (own: number) => localRows(basisOf(at, { degree: own, neighbours, weights: same === 0 ? Float64Array.of(1e-40, 1, 1, 1) : new Float64Array(at.length).fill(1) }), x).values;
    expect(largestDifference(rows(degree), rows(same))).toBeLessThan(1e-9);
  });

  it("three values a millionth apart still carry a parabola", () => {
    const at = [1, 1.000001, 1.000002, 2];
    const basis = basisOf(at, { neighbours: 4 });
    const x = 1.0000005;
    const parabola = (value: number) => 3 - 2 * (value - 1) + 5e6 * (value - 1) ** 2;
    const { values } = localRows(basis, Float64Array.of(x));
    expect(values.reduce((sum, weight, k) => sum + weight * (at[k] === 2 ? 0 : parabola(at[k])), 0)).toBeCloseTo(parabola(x), 8);
  });
});
