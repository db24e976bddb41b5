import { distinctValues } from "@shared/engine/basis/distinct-values";
import { seenNumbers, seenPerLevel } from "@shared/engine/basis/seen-values";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { seededUniform } from "../support/generator";

const runs = { numRuns: 200, seed: 20261201 };
const few = fc.array(fc.oneof(fc.constantFrom(0, -0, 1.49, 1e-300, -3), fc.double({ noNaN: true, noDefaultInfinity: true })), { maxLength: 80 });

describe("Distinct values", () => {
  it("are ascending, counted, and found again by every row's code", () => {
    fc.assert(fc.property(few, (list) => {
      const column = Float64Array.from(list);
      const found = distinctValues(column)!;
      const expected = [...new Set(list.map((value) => (value === 0 ? 0 : value)))].sort((left, right) => left - right);
      expect(Array.from(found.values, (value) => (value === 0 ? 0 : value))).toEqual(expected);
      expect(Array.from(found.codes, (code) => found.values[code]).every((value, row) => value === list[row])).toBe(true);
      expect(Array.from(found.counts)).toEqual(expected.map((value) => list.filter((own) => own === value).length));
    }), runs);
  });

  it("of a column that is part of a longer one are its own", () => {
    const whole = Float64Array.of(9, 9, 2, 1, 2);
    expect(distinctValues(whole.subarray(2))).toEqual({
      values: Float64Array.of(1, 2), counts: Float64Array.of(1, 2), codes: Int32Array.of(1, 0, 1),
    });
  });

  it("are sorted instead where there are many thousands, with the same result", () => {
    const uniform = seededUniform(5);
    const column = Float64Array.from({ length: 40_000 }, () => Math.floor(30_000 * uniform()));
    expect(distinctValues(column)).toBeNull();
    const { values, counts } = seenNumbers(column);
    expect(Array.from(values)).toEqual([...new Set(column)].sort((left, right) => left - right));
    expect(counts.reduce((sum, count) => sum + count, 0)).toBe(40_000);
  });

  it("within levels are the same by a table and by sorting", () => {
    const uniform = seededUniform(6);
    const index = Int32Array.from({ length: 9000 }, () => Math.floor(3 * uniform()));
    const coarse = Float64Array.from(index, () => Math.floor(50 * uniform()));
    const fine = Float64Array.from(coarse, (value, row) => value + row / 1e6);
    for (const column of [coarse, fine]) {
      const perLevel = seenPerLevel(column, index, 3);
      perLevel.forEach((seen, level) => expect(seen).toEqual(seenNumbers(column.filter((_, row) => index[row] === level))));
    }
  });
});
