import { learnBasis } from "@shared/engine/basis/term-basis";
import { coordinateWidth, transformColumns, transformRows } from "@shared/engine/fit/change-coordinates";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { describe, expect, it } from "vitest";
import { transformMatrix } from "../basis/term-values";
import { everyKind, everyKindRows } from "../support/every-kind-rows";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";

const rows = everyKindRows(6);
const others = 3;
const kinds = Object.entries(everyKind).filter(([name]) => name !== "local regression");

describe.each(kinds)("Into the coordinates of a %s", (_name, terms) => {
  const to = termCoordinates(learnBasis(terms[terms.length - 1], rows).basis);
  const { matrix, width } = transformMatrix(to.transform, to.rawWidth);
  const normal = seededNormal(1);

  it("a block's columns go as a product with the transform's matrix", () => {
    const block = Float64Array.from({ length: others * to.rawWidth }, normal);
    const out = new Float64Array(others * width).fill(7);
    transformColumns(block, others, to, out);
    const plain = Float64Array.from({ length: others * width }, (_, at) => {
      const row = Math.floor(at / width);
      let sum = 0;
      for (let k = 0; k < to.rawWidth; k++) sum += block[row * to.rawWidth + k] * matrix[k * width + (at % width)];
      return sum;
    });
    expect(coordinateWidth(to)).toBe(width);
    // Sums of a few numbers of the transform's own size.
    expect(largestDifference(out, plain)).toBeLessThan(1e-13 * Math.max(1, ...plain.map(Math.abs)));
  });

  it("a block's rows go as a product with the matrix turned over", () => {
    const block = Float64Array.from({ length: to.rawWidth * others }, normal);
    const out = new Float64Array(width * others).fill(7);
    transformRows(block, others, to, out);
    const plain = Float64Array.from({ length: width * others }, (_, at) => {
      const coordinate = Math.floor(at / others);
      let sum = 0;
      for (let k = 0; k < to.rawWidth; k++) sum += matrix[k * width + coordinate] * block[k * others + (at % others)];
      return sum;
    });
    expect(largestDifference(out, plain)).toBeLessThan(1e-13 * Math.max(1, ...plain.map(Math.abs)));
  });
});
