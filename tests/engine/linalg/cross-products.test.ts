import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { crossProduct, isSwapped } from "@shared/engine/linalg/cross-products";
import { addRowsTimes, addTransposeTimes, entriesPerRow, gatherRow, paddedWidth, roomForRow } from "@shared/engine/linalg/sparse-rows";
import { denseOf, plainCrossProduct, storages, unsigned, weightsOf } from "./storages";

/** Values are whole sixteenths, so every sum below is exact in any order: no tolerance is needed. */
const runs = { numRuns: 40, seed: 20260101 };
const count = 17;
const names = Object.keys(storages) as (keyof typeof storages)[];
const pairs = names.flatMap((left) => names.map((right) => [left, right] as const));

describe("cross-products of terms", () => {
  it.each(pairs)("of %s and %s rows are those of three plain loops", (leftName, rightName) => {
    fc.assert(fc.property(storages[leftName](count), storages[rightName](count), weightsOf(count), (one, other, weights) => {
      const [left, right] = isSwapped(one, other) ? [other, one] : [one, other];
      const out = new Float64Array(paddedWidth(left) * paddedWidth(right)).fill(7);
      crossProduct(left, right, weights, out);
      const expected = plainCrossProduct(
        { matrix: denseOf(left, count), width: left.width }, { matrix: denseOf(right, count), width: right.width }, weights,
      );
      expect(unsigned(out.subarray(0, expected.length))).toEqual(unsigned(expected));
    }), runs);
  });

  it.each(names)("of %s rows with themselves are symmetric and those of three plain loops", (name) => {
    fc.assert(fc.property(storages[name](count), weightsOf(count), (rows, weights) => {
      const out = new Float64Array(paddedWidth(rows) ** 2).fill(7);
      crossProduct(rows, rows, weights, out);
      const dense = { matrix: denseOf(rows, count), width: rows.width };
      const expected = plainCrossProduct(dense, dense, weights);
      expect(unsigned(out.subarray(0, expected.length))).toEqual(unsigned(expected));
    }), runs);
  });

  it("leave rows and weights as they were", () => {
    fc.assert(fc.property(storages["index with values"](count), storages.spline(count), weightsOf(count), (left, right, weights) => {
      const before = structuredClone({ left, right, weights });
      crossProduct(left, right, weights, new Float64Array(24));
      expect({ left, right, weights }).toEqual(before);
    }), runs);
  });
});

describe.each(names)("%s rows", (name) => {
  it("times coefficients are those of the dense matrix, added from the term's first coefficient on", () => {
    fc.assert(fc.property(storages[name](count), weightsOf(40), (rows, coefficients) => {
      const first = 3;
      const out = new Float64Array(count).fill(1);
      addRowsTimes(rows, coefficients, first, out);
      const matrix = denseOf(rows, count);
      const expected = out.map((_, row) => {
        let sum = 1;
        for (let k = 0; k < rows.width; k++) sum += matrix[row * rows.width + k] * coefficients[first + k];
        return sum;
      });
      expect(out).toEqual(expected);
    }), runs);
  });

  it("transposed times a vector are those of the dense matrix", () => {
    fc.assert(fc.property(storages[name](count), weightsOf(count), (rows, vector) => {
      const out = new Float64Array(rows.width + 2).fill(1);
      addTransposeTimes(rows, vector, out, 2);
      const matrix = denseOf(rows, count);
      const expected = out.map((_, k) => {
        let sum = 1;
        if (k >= 2) for (let row = 0; row < count; row++) sum += matrix[row * rows.width + k - 2] * vector[row];
        return sum;
      });
      expect(out).toEqual(expected);
    }), runs);
  });

  it("are gathered as as many entries as said, which make up the dense row", () => {
    fc.assert(fc.property(storages[name](count), fc.nat(count - 1), (rows, row) => {
      const entries = roomForRow(rows);
      expect(gatherRow(rows, row, 5, entries)).toBe(entriesPerRow(rows));
      const gathered = new Float64Array(rows.width);
      for (let k = 0; k < entries.indices.length; k++) gathered[entries.indices[k] - 5] += entries.values[k];
      expect(gathered).toEqual(unsigned(denseOf(rows, count).subarray(row * rows.width, (row + 1) * rows.width)));
    }), runs);
  });
});
