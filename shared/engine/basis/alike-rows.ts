import type { SplineRows } from "../linalg/sparse-rows";
import type { DistinctValues } from "./distinct-values";

/** Rows from which on it pays to look after those that are alike, and how many must share a distinct one on average. */
const manyRows = 4_000;
const fewestAlike = 8;

/**
 * Whether a column is long, and its values repeat, so that its splines are best found once per distinct value.
 *
 * @example areAlike(distinctValues(weeks), weeks.length); // true for 52 weeks in 100,000 rows
 */
export const areAlike = (distinct: DistinctValues | null | undefined, rows: number): distinct is DistinctValues =>
  distinct !== null && distinct !== undefined && isMany(distinct.values.length, rows);

/** Whether a column is so long that its distinct values are worth a code per row. */
export const isLong = (rows: number): boolean => rows >= manyRows;

const isMany = (distinct: number, rows: number): boolean => isLong(rows) && fewestAlike * distinct <= rows;

/**
 * Every row from its distinct one.
 *
 * @param distinct splines of the distinct values. codes per row, which of them.
 * @example repeatRows(splineRows(values, grid), codes);
 */
export function repeatRows(distinct: SplineRows, codes: Int32Array): SplineRows {
  const first = new Int32Array(codes.length);
  const values = new Float64Array(4 * codes.length);
  for (let row = 0; row < codes.length; row++) {
    const own = codes[row];
    const from = 4 * own;
    const to = 4 * row;
    first[row] = distinct.first[own];
    values[to] = distinct.values[from];
    values[to + 1] = distinct.values[from + 1];
    values[to + 2] = distinct.values[from + 2];
    values[to + 3] = distinct.values[from + 3];
  }
  return { ...distinct, first, values, alike: { codes, rows: distinct } };
}

/** Distinct values times levels up to which a table of their codes is made. */
const mostCells = 1_000_000;

/**
 * The same for a curve per level, whose rows are alike where value and level are.
 *
 * @param rows of all levels' splines. Not changed.
 * @param of.values per row, the code of its value, one of `distinct`; of.levels its level, one of `count`.
 * @example withAlikeLevels(splinesPerLevel(rows, index, 11), { values: codes, distinct: 5258, levels: index, count: 11 });
 */
export function withAlikeLevels(
  rows: SplineRows, of: { values: Int32Array; distinct: number; levels: Int32Array; count: number },
): SplineRows {
  const { values, distinct, levels, count } = of;
  if (distinct * count > mostCells) return rows;
  const codeOf = new Int32Array(distinct * count).fill(-1);
  const codes = new Int32Array(values.length);
  const examples: number[] = [];
  for (let row = 0; row < codes.length; row++) {
    const cell = levels[row] * distinct + values[row];
    if (codeOf[cell] < 0) codeOf[cell] = examples.push(row) - 1;
    codes[row] = codeOf[cell];
  }
  if (!isMany(examples.length, codes.length)) return rows;
  const alike: SplineRows = {
    storage: "spline", width: rows.width, wraps: false,
    first: Int32Array.from(examples, (row) => rows.first[row]),
    values: new Float64Array(4 * examples.length),
  };
  examples.forEach((row, own) => alike.values.set(rows.values.subarray(4 * row, 4 * row + 4), 4 * own));
  return { ...rows, alike: { codes, rows: alike } };
}
