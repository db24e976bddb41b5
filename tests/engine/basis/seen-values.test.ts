import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { ModelData } from "@shared/engine";
import { knownPositions, learnLevels, levelPositions, splinesPerLevel } from "@shared/engine/basis/levels";
import { perUnit } from "@shared/engine/basis/per-unit";
import { seenRows } from "@shared/engine/basis/seen-rows";
import { seenPairs, seenPerLevel } from "@shared/engine/basis/seen-values";
import type { SplineRows } from "@shared/engine/linalg/sparse-rows";
import { denseOf } from "../linalg/storages";
import { driverRows, fittedTerm, valuesOf } from "./term-values";

const runs = { numRuns: 60, seed: 20260106 };
const data = driverRows(10);

describe("What a fit saw", () => {
  it("of each level is that level's distinct values and their rows", () => {
    const [first, second, none] = seenPerLevel(Float64Array.of(3, 1, 3, 2, 1), Int32Array.of(0, 0, 0, 1, 1), 3);
    expect(first).toEqual({ values: Float64Array.of(1, 3), counts: Float64Array.of(1, 2) });
    expect(second).toEqual({ values: Float64Array.of(1, 2), counts: Float64Array.of(1, 1) });
    expect(none).toEqual({ values: new Float64Array(0), counts: new Float64Array(0) });
  });

  it("of two columns is every pair once, in order, with its rows", () => {
    const pair = fc.tuple(fc.integer({ min: 0, max: 3 }), fc.integer({ min: 0, max: 3 }));
    fc.assert(fc.property(fc.array(pair, { minLength: 1, maxLength: 30 }), (pairs) => {
      const { values, second, counts } = seenPairs(Float64Array.from(pairs, ([left]) => left), Float64Array.from(pairs, ([, right]) => right));
      const expected = [...new Set(pairs.map(([left, right]) => `${left},${right}`))].sort();
      expect(Array.from(values, (value, k) => `${value},${second[k]}`)).toEqual(expected);
      expect([...counts]).toEqual(expected.map((key) => pairs.filter(([left, right]) => `${left},${right}` === key).length));
    }), runs);
  });

  it("gives the rows of every kind of term, one per distinct value, pair or value of a level", () => {
    const distinct = new Set(data.price).size;
    const byStore = new Set(data.price.map((price, row) => `${price} ${data.store[row]}`)).size;
    const counts = [
      [fittedTerm({ kind: "smooth", column: "price" }, data, ["price"]), distinct],
      [fittedTerm({ kind: "smooth", column: "price", by: "temperature" }, data, ["price", "temperature"]), distinct],
      [fittedTerm({ kind: "smooth", column: "price", by: "store" }, data, ["price", "store"]), byStore],
      [fittedTerm({ kind: "factor-smooth", column: "price", group: "store" }, data, ["price", "store"]), byStore],
      [fittedTerm({ kind: "tensor-product", columns: ["price", "temperature"] }, data, ["price", "temperature"]), 60],
      [fittedTerm({ kind: "random-effect", column: "store", by: "temperature" }, data, ["store", "temperature"]), 4],
      [fittedTerm({ kind: "local-regression", column: "price", span: 0.5 }, data, ["price"]), distinct],
      [fittedTerm({ kind: "factor", column: "store" }, data, ["store"]), 4],
    ] as const;
    for (const [term, expected] of counts) {
      const { rows, count } = seenRows(term);
      expect(count).toBe(expected);
      // Splines sum to one in a row, and so do the indicators of levels.
      for (const sum of valuesOf(rows, new Float64Array(rows.width).fill(1), count)) expect(sum).toBeCloseTo(1, 11);
    }
  });
});

describe("Levels", () => {
  it("are sorted, numbers by size and before text, with each row's position", () => {
    expect(learnLevels({ store: ["10", "9", "10", "2"] }, "store", "factor")).toEqual({ levels: ["2", "9", "10"], index: Int32Array.of(2, 1, 2, 0) });
    expect(learnLevels({ store: ["none", "feature", "none"] }, "store", "factor").levels).toEqual(["feature", "none"]);
  });

  it("are the same as a number and as its text", () => {
    const mixed: ModelData = JSON.parse('{"deal":[1,"1",0]}') as ModelData;
    expect(learnLevels(mixed, "deal", "factor")).toEqual({ levels: ["0", "1"], index: Int32Array.of(1, 1, 0) });
  });

  it("are refused where one is not a number, by column and row", () => {
    expect(() => learnLevels({ deal: [1, Number.NaN] }, "deal", "factor")).toThrow('Column "deal" (factor) must be finite; row 2 is NaN.');
  });

  it("have positions, -1 for one never seen, or an error that names it", () => {
    expect([...levelPositions(["a", "b"], ["b", "c", "a"])]).toEqual([1, -1, 0]);
    expect([...knownPositions({ column: "brand", levels: ["a", "b"] }, ["b", "a"])]).toEqual([1, 0]);
    expect(() => knownPositions({ column: "brand", levels: ["a", "b"] }, ["a", "c"])).toThrow(
      'Level "c" of factor "brand" (row 2) was never seen in the fit; seen were "a", "b".',
    );
  });

  it("put a row's splines into its level's columns, and leave rows of no level empty", () => {
    const rows: SplineRows = { storage: "spline", width: 5, wraps: false, first: Int32Array.of(0, 1, 1), values: Float64Array.from({ length: 12 }, (_, k) => k + 1) };
    const perLevel = splinesPerLevel(rows, Int32Array.of(1, -1, 0), 2);
    expect([...denseOf(perLevel, 3)]).toEqual([
      0, 0, 0, 0, 0, 1, 2, 3, 4, 0,
      0, 0, 0, 0, 0, 0, 0, 0, 0, 0,
      0, 9, 10, 11, 12, 0, 0, 0, 0, 0,
    ]);
    expect(rows.values[4]).toBe(5);
  });
});

describe("A term per unit", () => {
  it("is the smooth, or the level per group, without the number; others stay as they are", () => {
    const scaled = fittedTerm({ kind: "smooth", column: "price", by: "temperature" }, data, ["price", "temperature"]).basis;
    const plain = fittedTerm({ kind: "smooth", column: "price" }, data, ["price"]).basis;
    expect(perUnit(scaled)).toEqual(plain);
    expect(perUnit(plain)).toBe(plain);
    const slope = fittedTerm({ kind: "random-effect", column: "store", by: "temperature" }, data, ["store", "temperature"]).basis;
    expect(perUnit(slope)).toEqual({ ...slope, by: null });
  });
});
