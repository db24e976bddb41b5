import { describe, expect, it } from "vitest";
import { basisLogSlopeRows, basisRows, coefficientNames, outsideRows } from "@shared/engine/basis/term-basis";
import { driverRows, fittedTerm, learn } from "./term-values";

const data = driverRows(5);
const term = { kind: "random-walk", column: "week" } as const;

describe("A random walk", () => {
  const { basis, rows, seen, observedRange } = learn("random-walk", term, data);
  const last = Math.max(...data.week);

  it("has one column per week from the first seen to the last, those without rows too", () => {
    expect(new Set(data.week).size).toBeLessThan(last - 20 + 1);
    expect([basis.first, basis.last]).toEqual([20, last]);
    expect(basis.centring).toHaveLength(last - 20 + 1);
    expect(rows).toEqual({ storage: "index", width: last - 20 + 1, index: Int32Array.from(data.week, (week) => week - 20), values: null });
    expect(observedRange).toEqual([20, last]);
    expect(seen.counts.reduce((sum, count) => sum + count, 0)).toBe(60);
    expect(coefficientNames(basis, "week").slice(0, 2)).toEqual(["week[20]", "week[21]"]);
  });

  it("is held flat before the first and after the last week, flagged outside", () => {
    const next = { week: [3, 20, last, last + 9] };
    expect(basisRows(basis, next)).toMatchObject({ index: Int32Array.of(0, 0, last - 20, last - 20) });
    expect([...outsideRows(fittedTerm(term, data, ["week"]), next)]).toEqual([1, 0, 0, 1]);
  });

  it("has no slope by ln x", () => {
    expect(basisLogSlopeRows(basis, data)).toBeNull();
  });

  it("takes weeks below zero", () => {
    const { basis: early } = learn("random-walk", term, { week: [-3, -1, 0, 4] });
    expect([early.first, early.last]).toEqual([-3, 4]);
  });

  it("has a column for each of 1,500 weeks, and refuses more", () => {
    expect(learn("random-walk", term, { week: [1, 2, 3, 1500] }).rows.width).toBe(1500);
    expect(() => learn("random-walk", term, { week: [1, 2, 3, 1501] })).toThrow(expect.objectContaining({
      code: "spec-invalid", message: 'Term "week": column "week" runs from 1 to 1501, 1501 weeks; a random walk has at most 1500.',
    }));
  });

  it("refuses weeks that are not whole, in the fit and after it", () => {
    const error = expect.objectContaining({ code: "column-kind", message: 'Column "week" (random-walk) must hold whole numbers of weeks; row 2 is 1.5.' });
    expect(() => learn("random-walk", term, { week: [1, 1.5, 2, 3] })).toThrow(error);
    expect(() => basisRows(basis, { week: [21, 1.5] })).toThrow(error);
  });

  it("refuses a single week", () => {
    expect(() => learn("random-walk", term, { week: [7, 7, 7] })).toThrow(
      'Term "week": column "week" is constant (7); a curve needs values that vary.',
    );
  });
});
