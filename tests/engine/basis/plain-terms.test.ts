import { describe, expect, it } from "vitest";
import { covariate, levelColumn, numberColumn, rowCount } from "@shared/engine/basis/columns";
import { basisLogSlopeRows, basisRows, coefficientNames, outsideRows } from "@shared/engine/basis/term-basis";
import { denseOf } from "../linalg/storages";
import { largestDifference } from "../support/measures";
import { curveAt, driverRows, fittedTerm, learn, someCoefficients, valuesOf } from "./term-values";

const data = driverRows(15);
const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;

describe("A straight line", () => {
  const { basis, rows, observedRange } = learn("linear", { kind: "linear", column: "price", log: true }, data);
  const logs = data.price.map(Math.log);

  it("is x less its mean over the rows, of the logarithm where asked", () => {
    expect(basis.centre).toBeCloseTo(mean(logs), 14);
    expect(basis.scale).toBeCloseTo(Math.sqrt(mean(logs.map((value) => (value - mean(logs)) ** 2))), 14);
    expect(largestDifference(denseOf(rows, 60), logs.map((value) => value - basis.centre))).toBe(0);
    expect(observedRange).toEqual([Math.min(...data.price), Math.max(...data.price)]);
    expect(coefficientNames(basis, "price")).toEqual(["price"]);
  });

  it("has a slope by ln x of one under a logarithm, of x without", () => {
    const plain = learn("linear", { kind: "linear", column: "price" }, data).basis;
    expect([...valuesOf(basisLogSlopeRows(basis, { price: [1, 2] })!, [1], 2)]).toEqual([1, 1]);
    expect([...valuesOf(basisLogSlopeRows(plain, { price: [1, 2] })!, [1], 2)]).toEqual([1, 2]);
  });

  it("of a constant column is zero in every row, to be found and left out", () => {
    const { basis: constant, rows: none } = learn("linear", { kind: "linear", column: "price" }, { price: [0.1, 0.1, 0.1] });
    expect([...denseOf(none, 3)]).toEqual([0, 0, 0]);
    expect(constant.scale).toBe(1);
  });

  it("keeps the digits of a large column of small changes", () => {
    const price = [1e9 + 0.25, 1e9 + 0.5, 1e9 + 0.75];
    expect(largestDifference(denseOf(learn("linear", { kind: "linear", column: "price" }, { price }).rows, 3), [-0.25, 0, 0.25])).toBe(0);
  });
});

describe("A factor", () => {
  it("has a column per level in sorted order and the first as its reference", () => {
    const { basis, rows, seen } = learn("factor", { kind: "factor", column: "promotion" }, data);
    expect(basis).toEqual({ kind: "factor", column: "promotion", levels: ["feature", "none"], reference: "feature" });
    expect(rows).toEqual({ storage: "index", width: 2, index: Int32Array.from(data.promotion, (level) => Number(level === "none")), values: null });
    expect(seen.counts[0] + seen.counts[1]).toBe(60);
    expect(basisLogSlopeRows(basis, data)).toBeNull();
    expect(basisRows(basis, { promotion: ["none"] })).toEqual({ storage: "index", width: 2, index: Int32Array.of(1), values: null });
  });
});

describe("A curve on a circle", () => {
  const term = { kind: "cyclic-smooth", column: "week", period: [0, 52] as [number, number] } as const;
  const { basis } = learn("cyclic-smooth", term, data);
  const coefficients = someCoefficients(12);

  it("has 12 splines, is the same a period later and nowhere outside", () => {
    const at = (shift: number) => curveAt(basis, coefficients, { week: [0, 3.7, 26, 51.9].map((week) => week + shift) }, 4);
    expect(basis.size).toBe(12);
    expect(largestDifference(at(0), at(52))).toBeLessThan(1e-12);
    expect(largestDifference(at(0), at(-104))).toBeLessThan(1e-12);
    expect([...outsideRows(fittedTerm(term, data, ["week"]), { week: [-900, 900] })]).toEqual([0, 0]);
  });

  it("joins with its value and slope where the circle closes", () => {
    const [before, after] = curveAt(basis, coefficients, { week: [52 - 1e-9, 1e-9] }, 2);
    expect(Math.abs(before - after)).toBeLessThan(1e-7);
    const [own] = valuesOf(basisLogSlopeRows(basis, { week: [51] })!, coefficients, 1);
    const [above, below] = curveAt(basis, coefficients, { week: [51 * Math.exp(1e-5), 51 * Math.exp(-1e-5)] }, 2);
    // Central difference: step^2 x third derivative, here 51^3 x a few, and rounding / step.
    expect(Math.abs(own - (above - below) / 2e-5)).toBeLessThan(1e-5);
  });
});

describe("Columns", () => {
  it("are counted together, and refused where they differ or are missing", () => {
    expect(rowCount({ price: [1, 2], units: Float64Array.of(3, 4) }, [["price", "smooth"], ["units", "response"]])).toBe(2);
    expect(rowCount({}, [])).toBe(0);
    expect(() => rowCount({ price: [1, 2], units: [1] }, [["price", "smooth"], ["units", "response"]])).toThrow(
      'Column "units" has 1 rows, "price" has 2; all columns must have the same length.',
    );
    expect(() => rowCount({}, [["price", "smooth"]])).toThrow('Column "price" (smooth) is missing; the data has no columns.');
  });

  it("of numbers are taken as they are, of anything else refused by row", () => {
    const typed = Float64Array.of(1, 2);
    expect(numberColumn({ price: typed }, "price", "smooth")).toEqual(typed);
    expect(() => numberColumn({ price: ["1", "2"] }, "price", "smooth")).toThrow('Column "price" (smooth) must hold numbers; row 1 is "1".');
    expect(() => numberColumn({ toString: [1] }, "price", "smooth")).toThrow('Column "price" (smooth) is missing; the data has "toString".');
    expect(() => numberColumn({}, "toString", "smooth")).toThrow('Column "toString" (smooth) is missing; the data has no columns.');
  });

  it("under a logarithm must be above zero", () => {
    expect([...covariate({ price: [1, 4] }, { column: "price", log: true }, "linear")]).toEqual([0, Math.log(4)]);
    expect(() => covariate({ price: [1, -4] }, { column: "price", log: true }, "linear")).toThrow(
      'Column "price" (linear, log) must be above 0 to have a logarithm; row 2 is -4.',
    );
  });

  it("of levels may be numbers or text", () => {
    expect(levelColumn({ deal: [1, 0.5] }, "deal", "factor")).toEqual(["1", "0.5"]);
    expect(() => levelColumn(JSON.parse('{"deal":[true]}') as { deal: number[] }, "deal", "factor")).toThrow(
      'Column "deal" (factor) must hold text or numbers; row 1 is true.',
    );
  });
});
