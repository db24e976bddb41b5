import { describe, expect, it } from "vitest";
import { basisLogSlopeRows, basisRows, coefficientNames, columnsOf, outsideRows, termId } from "@shared/engine/basis/term-basis";
import { gridRowsAt } from "@shared/engine/basis/spline-grid";
import { denseOf } from "../linalg/storages";
import { largestDifference } from "../support/measures";
import { curveAt, driverRows, fittedTerm, learn, someCoefficients, valuesOf } from "./term-values";

const data = driverRows(4);

describe("A random effect", () => {
  const level = learn("random-effect", { kind: "random-effect", column: "store" }, data);
  const slope = learn("random-effect", { kind: "random-effect", column: "store", by: "temperature" }, data);

  it("has one column per group in sorted order, 1 or the number in the row's own", () => {
    expect(level.basis).toEqual({ kind: "random-effect", column: "store", by: null, levels: ["s0", "s1", "s2", "s3"] });
    expect(level.rows).toEqual({ storage: "index", width: 4, index: Int32Array.from(data.store, (_, row) => row % 4), values: null });
    expect(slope.rows).toEqual({ ...level.rows, values: Float64Array.from(data.temperature) });
    expect(level.seen).toEqual({ values: ["s0", "s1", "s2", "s3"], counts: Float64Array.of(15, 15, 15, 15) });
  });

  it("takes numbers for groups, sorted by size", () => {
    const { basis } = learn("random-effect", { kind: "random-effect", column: "store" }, { store: [10, 2, 2, 33] });
    expect(basis.levels).toEqual(["2", "10", "33"]);
    expect(coefficientNames(basis, "store")).toEqual(["store[2]", "store[10]", "store[33]"]);
  });

  it("gives a group never seen a row of zeros, flagged outside", () => {
    const next = { store: ["s3", "new", "s1"], temperature: [2, 3, 4] };
    expect([...curveAt(level.basis, [1, 2, 3, 4], next, 3)]).toEqual([4, 0, 2]);
    expect([...curveAt(slope.basis, [1, 2, 3, 4], next, 3)]).toEqual([8, 0, 8]);
    const term = fittedTerm({ kind: "random-effect", column: "store" }, data, ["store"]);
    expect([...outsideRows(term, next)]).toEqual([0, 1, 0]);
  });

  it("is named by its columns and has no slope by ln x", () => {
    expect(columnsOf({ kind: "random-effect", column: "store", by: "depth" })).toEqual(["store", "depth"]);
    expect(termId({ kind: "random-effect", column: "store", by: "depth" })).toBe("store:depth");
    expect(basisLogSlopeRows(level.basis, data)).toBeNull();
  });

  it("does not keep the caller's column of numbers", () => {
    const temperature = Float64Array.from(data.temperature);
    const { rows } = learn("random-effect", { kind: "random-effect", column: "store", by: "temperature" }, { ...data, temperature });
    expect(rows.storage === "index" && rows.values !== temperature).toBe(true);
  });
});

describe("A curve per group", () => {
  const term = { kind: "factor-smooth", column: "price", log: true, group: "store", size: 6 } as const;
  const { basis, rows, seen } = learn("factor-smooth", term, data);
  const { toCoefficients } = basis;
  const part = (k: number) => Float64Array.from({ length: 6 }, (_, row) => toCoefficients[6 * row + k]);
  const logs = Float64Array.from(data.price, Math.log);
  /** Each part's value in every row, as one curve of all rows. */
  const partValues = Array.from({ length: 6 }, (_, k) => valuesOf(gridRowsAt(basis, logs), part(k), 60));
  const product = (left: Float64Array, right: Float64Array) => left.reduce((sum, value, row) => sum + value * right[row], 0);

  it("has 6 splines a group where no size is named, in the columns of the row's group", () => {
    expect(learn("factor-smooth", { kind: "factor-smooth", column: "price", log: true, group: "store" }, data).basis.size).toBe(6);
    const single = denseOf(gridRowsAt(basis, logs), 60);
    const own = denseOf(rows, 60);
    for (let row = 0; row < 60; row++) {
      const first = 24 * row + 6 * (row % 4);
      expect(own.subarray(first, first + 6)).toEqual(single.subarray(6 * row, 6 * row + 6));
      expect(own.subarray(24 * row, 24 * row + 24).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 13);
    }
  });

  it("has a level of one, and a slope that is x less its mean in standard deviations", () => {
    expect([...part(0)]).toEqual([1, 1, 1, 1, 1, 1]);
    const mean = product(logs, logs.map(() => 1)) / 60;
    const spread = Math.sqrt(product(logs.map((value) => value - mean), logs) / 60);
    expect(largestDifference(partValues[1], logs.map((value) => (value - mean) / spread))).toBeLessThan(1e-13);
  });

  it("has parts that are orthogonal over all rows: level to slope, and both to the wiggly part", () => {
    for (let k = 1; k < 6; k++) expect(Math.abs(product(partValues[0], partValues[k]))).toBeLessThan(1e-11);
    for (let k = 2; k < 6; k++) expect(Math.abs(product(partValues[1], partValues[k]))).toBeLessThan(1e-11);
  });

  it("has second differences of the wiggly part that are the identity, and none of level and slope", () => {
    const differences = (k: number) => Array.from({ length: 4 }, (_, i) => part(k)[i] - 2 * part(k)[i + 1] + part(k)[i + 2]);
    for (let k = 0; k < 6; k++) {
      const expected = [0, 1, 2, 3].map((i) => (i === k - 2 ? 1 : 0));
      expect(largestDifference(differences(k), expected)).toBeLessThan(1e-13);
    }
  });

  it("gives a group never seen rows of zeros, flagged outside as is a price beyond the range", () => {
    const next = { price: [1.5, 1.5, 40], store: ["s2", "new", "s2"] };
    expect([...denseOf(basisRows(basis, next), 3).subarray(24, 48)]).toEqual(new Array<number>(24).fill(0));
    expect([...outsideRows(fittedTerm(term, data, ["price", "store"]), next)]).toEqual([0, 1, 1]);
  });

  it("has slopes by ln x of the row's group alone", () => {
    const coefficients = someCoefficients(24);
    const next = { price: [1.5, 2.5], store: ["s1", "new"] };
    const [slope, none] = valuesOf(basisLogSlopeRows(basis, next)!, coefficients, 2);
    const step = 1e-5;
    const [above, below] = curveAt(basis, coefficients, { price: [1.5 * Math.exp(step), 1.5 * Math.exp(-step)], store: ["s1", "s1"] }, 2);
    expect(slope).toBeCloseTo((above - below) / (2 * step), 7);
    expect(none).toBe(0);
  });

  it("keeps what each group saw, and reads both columns", () => {
    expect(seen.byLevel?.map(({ counts }) => counts.reduce((sum, value) => sum + value, 0))).toEqual([15, 15, 15, 15]);
    expect(columnsOf(term)).toEqual(["price", "store"]);
    expect(coefficientNames(basis, "f").slice(5, 7)).toEqual(["f[s0,6]", "f[s1,1]"]);
  });
});
