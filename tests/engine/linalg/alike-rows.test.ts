import { describe, expect, it } from "vitest";
import { crossProduct } from "@shared/engine/linalg/cross-products";
import { addRowsTimes, addTransposeTimes, paddedWidth } from "@shared/engine/linalg/sparse-rows";
import type { SparseRows, SplineRows } from "@shared/engine/linalg/sparse-rows";
import { areAlike, repeatPerLevel, repeatRows } from "@shared/engine/basis/alike-rows";
import { distinctValues } from "@shared/engine/basis/distinct-values";
import { splinesPerLevel } from "@shared/engine/basis/levels";
import { splineRows } from "@shared/engine/basis/uniform-spline";

const count = 6_000;
const perRow = (of: (row: number) => number) => Float64Array.from({ length: count }, (_, row) => of(row));
const weeks = perRow((row) => 1 + ((row * 7) % 52));
const prices = perRow((row) => 1 + ((row * 31) % 90) / 40);
const levels = Int32Array.from({ length: count }, (_, row) => (row * row) % 3);
const weights = perRow((row) => 0.5 + ((row * 13) % 17) / 10);

const circle = { lower: 0.5, upper: 52.5, intervals: 12, wraps: true };
const line = { lower: 0.9, upper: 3.3, intervals: 5, wraps: false };

function alikeOf(values: Float64Array, grid: typeof line): SplineRows {
  const distinct = distinctValues(values);
  if (!areAlike(distinct, count)) throw new Error("These values do repeat.");
  return repeatRows(splineRows(distinct.values, grid), distinct.codes);
}

function perLevelAlike(): SplineRows {
  const { alike } = alikeOf(prices, line);
  const rows = alike === undefined ? null : repeatPerLevel(alike, levels, 3);
  if (rows === null) throw new Error("These values do repeat within levels.");
  return rows;
}

const plain = (rows: SparseRows): SparseRows => (rows.storage === "spline" ? { ...rows, alike: undefined } : rows);

const season = alikeOf(weeks, circle);
const price = alikeOf(prices, line);
const perLevel = perLevelAlike();
const single: SparseRows = { storage: "single", width: 1, values: perRow((row) => row % 5) };
const index: SparseRows = { storage: "index", width: 3, index: levels, values: null };
const scaledIndex: SparseRows = { storage: "index", width: 3, index: levels, values: perRow((row) => (row % 4) - 1) };
const unalike: SparseRows = splineRows(perRow((row) => 1 + (row % 5_987) / 3_000), line);

function product(left: SparseRows, right: SparseRows): number[] {
  const out = new Float64Array(paddedWidth(left) * paddedWidth(right));
  crossProduct(left, right, weights, out);
  return Array.from(out.subarray(0, left.width * right.width));
}

function expectAlmostEqual(found: readonly number[], expected: readonly number[]): void {
  const largest = Math.max(...expected.map(Math.abs));
  found.forEach((value, at) => expect(Math.abs(value - expected[at])).toBeLessThan(1e-11 * largest));
}

const splines = { "a circle": season, "a curve": price, "a curve per level": perLevel };
const others = { "one column": single, levels: index, "levels with values": scaledIndex, "a curve": price, "a circle": season, "a curve of unlike rows": unalike };

describe("rows that are alike", () => {
  it.each(Object.entries(splines))("give %s with itself as row by row", (_name, rows) => {
    expect(rows.alike).toBeDefined();
    const own = plain(rows);
    expectAlmostEqual(product(rows, rows), product(own, own));
  });

  it.each(Object.entries(splines).flatMap(([name, rows]) => Object.entries(others)
    .filter(([, left]) => left !== rows).map(([other, left]) => [other, name, left, rows] as const)))(
    "give %s with %s as row by row", (_other, _name, left, rows) => {
      expectAlmostEqual(product(left, rows), product(plain(left), plain(rows)));
      if (left.storage === "spline") expectAlmostEqual(product(rows, left), product(plain(rows), plain(left)));
    },
  );

  it.each(Object.entries(splines))("give %s times coefficients, and its transpose times a vector, as row by row", (_name, rows) => {
    const coefficients = Float64Array.from({ length: rows.width }, (_, k) => Math.sin(k + 1));
    const [found, expected] = [new Float64Array(count).fill(1), new Float64Array(count).fill(1)];
    addRowsTimes(rows, coefficients, 0, found);
    addRowsTimes(plain(rows), coefficients, 0, expected);
    expect(found).toEqual(expected);
    const [sums, sumsByRow] = [new Float64Array(rows.width), new Float64Array(rows.width)];
    addTransposeTimes(rows, weights, sums, 0);
    addTransposeTimes(plain(rows), weights, sumsByRow, 0);
    expectAlmostEqual(Array.from(sums), Array.from(sumsByRow));
  });

  it("hold the very values that splines of the whole column have", () => {
    expect(price.values).toEqual(splineRows(prices, line).values);
    expect(price.first).toEqual(splineRows(prices, line).first);
    const own = splinesPerLevel(splineRows(prices, line), levels, 3);
    expect(perLevel.values).toEqual(own.values);
    expect(perLevel.first).toEqual(own.first);
    expect(season.values).toEqual(splineRows(weeks, circle).values);
  });

  it("are not looked after in short columns, nor where values hardly repeat", () => {
    expect(areAlike(distinctValues(Float64Array.of(1, 1, 1, 1)), 4)).toBe(false);
    expect(areAlike(distinctValues(perRow((row) => row)), count)).toBe(false);
  });
});
