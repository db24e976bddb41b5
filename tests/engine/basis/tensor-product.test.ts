import { describe, expect, it } from "vitest";
import { basisLogSlopeRows, basisRows, coefficientNames, columnsOf, outsideRows, termId } from "@shared/engine/basis/term-basis";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { denseOf } from "../linalg/storages";
import { largestDifference } from "../support/measures";
import { coordinateCurve, curveAt, driverRows, fittedTerm, learn } from "./term-values";

const data = driverRows(6);
const term = { kind: "tensor-product", columns: ["price", "temperature"], sizes: [5, 6] } as { kind: "tensor-product"; columns: [string, string]; sizes: [number, number] };
const { basis, rows, seen, observedRange } = learn("tensor-product", term, data);

describe("A tensor product", () => {
  it("has rows that are the products of the two smooths' rows", () => {
    const left = learn("smooth", { kind: "smooth", column: "price", size: 5 }, data);
    const right = learn("smooth", { kind: "smooth", column: "temperature", size: 6 }, data);
    const own = denseOf(rows, 60);
    const [a, b] = [denseOf(left.rows, 60), denseOf(right.rows, 60)];
    for (let row = 0; row < 60; row++) {
      for (let k = 0; k < 30; k++) expect(own[30 * row + k]).toBe(a[5 * row + Math.floor(k / 6)] * b[6 * row + (k % 6)]);
    }
    expect(basis.margins.map(({ lower, upper }) => [lower, upper])).toEqual([left, right].map((margin) => [margin.basis.lower, margin.basis.upper]));
  });

  it("sums to one in every row of new data", () => {
    const sums = curveAt(basis, new Float64Array(30).fill(1), { price: [0.2, 1.7, 9], temperature: [40, 12, -30] }, 3);
    expect(largestDifference(sums, [1, 1, 1])).toBeLessThan(1e-11);
  });

  it("has in every coordinate no main effect of either column: its mean over the rows of the other is zero", () => {
    const { unpenalised, penalised } = termCoordinates(basis);
    expect(unpenalised + penalised).toBe(4 * 5);
    for (let coordinate = 0; coordinate < 20; coordinate++) {
      const curve = coordinateCurve(basis, coordinate);
      for (const fixed of [1.1, 2.4]) {
        const overTemperatures = curveAt(basis, curve, { price: data.price.map(() => fixed), temperature: data.temperature }, 60);
        expect(Math.abs(overTemperatures.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-9);
      }
      const overPrices = curveAt(basis, curve, { price: data.price, temperature: data.price.map(() => 15) }, 60);
      expect(Math.abs(overPrices.reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-9);
    }
  });

  it("has as its first coordinate a line times a line", () => {
    const line = coordinateCurve(basis, 0);
    const at = (price: number, temperature: number) => curveAt(basis, line, { price: [price], temperature: [temperature] }, 1)[0];
    expect(at(1.2, 8) - 2 * at(1.7, 8) + at(2.2, 8)).toBeCloseTo(0, 11);
    expect(at(1.2, 4) - 2 * at(1.2, 10) + at(1.2, 16)).toBeCloseTo(0, 11);
    expect(Math.abs(at(1.2, 4) - at(1.2, 16))).toBeGreaterThan(0.01);
  });

  it("keeps the pairs it saw and both ranges", () => {
    expect(observedRange).toBeNull();
    expect(basis.ranges).toEqual([
      [Math.min(...data.price), Math.max(...data.price)], [Math.min(...data.temperature), Math.max(...data.temperature)],
    ]);
    expect(seen.counts.reduce((sum, count) => sum + count, 0)).toBe(60);
    expect(seen.second).toHaveLength(seen.values.length);
  });

  it("flags a row outside either range", () => {
    const next = { price: [1.5, 0.5, 1.5], temperature: [12, 12, 90] };
    expect([...outsideRows(fittedTerm(term, data, ["price", "temperature"]), next)]).toEqual([0, 1, 1]);
  });

  it("has five splines a column where no sizes are named, names for all, and no slope by ln x", () => {
    const byDefault = learn("tensor-product", { kind: "tensor-product", columns: ["price", "temperature"] }, data);
    expect(byDefault.rows.width).toBe(25);
    expect(coefficientNames(basis, "t").slice(5, 7)).toEqual(["t[1,6]", "t[2,1]"]);
    expect(columnsOf(term)).toEqual(["price", "temperature"]);
    expect(termId(term)).toBe("price:temperature");
    expect(basisLogSlopeRows(basis, data)).toBeNull();
  });

  it("refuses sizes it has no room for, and columns that cannot carry a curve", () => {
    const learnWith = (sizes: [number, number], change = {}) => () => learn("tensor-product", { ...term, sizes }, { ...data, ...change });
    expect(learnWith([5, 21])).toThrow(expect.objectContaining({
      code: "spec-invalid", message: 'Term "price:temperature": a size is 21; both must be whole numbers from 4 to 20.',
    }));
    expect(learnWith([3, 5])).toThrow('Term "price:temperature": a size is 3; both must be whole numbers from 4 to 20.');
    expect(learnWith([5, 5], { temperature: data.price.map(() => 3) })).toThrow(
      'Term "price:temperature": column "temperature" is constant (3); a curve needs values that vary.',
    );
    expect(() => basisRows(basis, { price: [1] })).toThrow('Column "temperature" (tensor-product) is missing; the data has "price".');
  });

  it("warns of each column with fewer values than splines", () => {
    const { warnings } = learn("tensor-product", { ...term, sizes: [6, 6] }, { ...data, price: data.price.map((_, row) => row % 5) });
    expect(warnings.map(({ code, message }) => [code, message])).toEqual([[
      "few-distinct-values",
      'Term "price:temperature" has 5 distinct values for a curve of size 6: between them its shape comes from the smoothness penalty alone.',
    ]]);
  });
});
