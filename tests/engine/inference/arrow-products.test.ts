import { entryProduct, lowerHalf, remainder, timesSymmetric } from "@shared/engine/inference/arrow-products";
import { arrowRoot, conjugatedPenalty } from "@shared/engine/inference/arrow-root";
import type { Arrow } from "@shared/engine/inference/arrow-root";
import { splineBasis } from "@shared/engine/inference/spline-basis";
import { Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { denseOf } from "./support/dense";
import { exampleModel, partsOf } from "./support/example-models";

/** A symmetric arrow written out: groups first; `cross` mirrored. */
function written({ own, cross, shared }: Arrow, size: number, width: number): Matrix {
  const lines = width === 0 ? 0 : own.length / width;
  const matrix = Matrix.zeros(lines + size, lines + size);
  for (let line = 0; line < lines; line++) {
    for (let k = 0; k < width; k++) matrix.set(line, line - (line % width) + k, own[line * width + k]);
    for (let k = 0; k < size; k++) {
      matrix.set(line, lines + k, cross[line * size + k]);
      matrix.set(lines + k, line, cross[line * size + k]);
    }
  }
  for (let row = 0; row < size; row++) for (let k = 0; k < size; k++) matrix.set(lines + row, lines + k, shared[row * size + k]);
  return matrix;
}

/** Lower triangle, the diagonal halved. */
const half = (matrix: Matrix): Matrix =>
  new Matrix(matrix.to2DArray().map((values, row) => values.map((value, column) => (column < row ? value : column === row ? value / 2 : 0))));

const names = ["curves and a factor", "levels and slopes of stores", "a curve per store", "two groupings"];

describe.each(names)("Arrow-shaped products in a model with %s", (name) => {
  const { information, posterior, places } = partsOf(exampleModel(name));
  const { size } = posterior;
  const width = posterior.grouped.length;
  const root = arrowRoot(posterior, splineBasis(posterior, places))!;
  const conjugated = posterior.penalties.map((penalty) => conjugatedPenalty(posterior, root, penalty));
  const kept = remainder(posterior, conjugated);
  const lines = width === 0 ? 0 : root.own.length / width;
  // B is not symmetric: nothing stands below the groups' rows.
  const wholeRoot = written(root, size, width);
  for (let k = 0; k < size; k++) for (let line = 0; line < lines; line++) wholeRoot.set(lines + k, line, 0);
  const dense = denseOf(information, posterior);
  const largest = (matrix: Matrix) => Math.max(...matrix.to1DArray().map(Math.abs), 1e-300);
  const expectEqual = (one: Matrix, other: Matrix, within: number) => {
    expect(largest(one.clone().sub(other))).toBeLessThan(within * Math.max(largest(other), 1e-6));
  };

  it("conjugate each penalty: B' S_j B, whole blocks between groups being zero", () => {
    conjugated.forEach((arrow, j) => {
      const expected = wholeRoot.transpose().mmul(Matrix.diag(dense.penalties[j])).mmul(wholeRoot);
      expectEqual(written(arrow, size, width), expected, 1e-9);
    });
  });

  it("leave B' X'WX B", () => {
    expectEqual(written(kept, size, width), wholeRoot.transpose().mmul(dense.information).mmul(wholeRoot), 1e-6);
  });

  it("multiply a halved lower triangle by a symmetric arrow, and take the trace with another: tr(P_j N P_k')", () => {
    const halves = conjugated.map((arrow) => half(written(arrow, size, width)));
    const whole = written(kept, size, width);
    conjugated.forEach((left, j) => conjugated.forEach((right, k) => {
      const own = entryProduct(timesSymmetric(lowerHalf(left, size, width), kept, size, width), lowerHalf(right, size, width));
      const expected = halves[j].mmul(whole).mmul(halves[k].transpose()).trace();
      expect(Math.abs(own - expected)).toBeLessThan(1e-9 * Math.max(1e-3, Math.abs(expected)));
    }));
  });

  it("halve no more than the diagonal", () => {
    conjugated.forEach((arrow) => {
      const halved = lowerHalf(arrow, size, width);
      for (let row = 0; row < size; row++) {
        expect(halved.shared[row * (size + 1)]).toBe(arrow.shared[row * (size + 1)] / 2);
        for (let column = row + 1; column < size; column++) expect(halved.shared[row * size + column]).toBe(0);
      }
      expect(halved.cross).toEqual(arrow.cross);
    });
  });
});
