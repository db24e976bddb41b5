import type { AlikeRows, SplineRows } from "../linalg/sparse-rows";
import { mostCells } from "./distinct-values";
import type { DistinctValues } from "./distinct-values";
import { splinesPerLevel } from "./levels";

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
 * Every row from its distinct one; written out per row only when something asks for that, as many sums never do.
 *
 * @param distinct splines of the distinct values. codes per row, which of them.
 * @example repeatRows(splineRows(values, grid), codes);
 */
export function repeatRows(distinct: SplineRows, codes: Int32Array): SplineRows {
  let whole: Pick<SplineRows, "first" | "values"> | null = null;
  const written = () => (whole ??= writeRows(distinct, codes));
  return {
    storage: "spline", width: distinct.width, wraps: distinct.wraps, alike: { codes, rows: distinct },
    get first() { return written().first; },
    get values() { return written().values; },
  };
}

function writeRows(distinct: SplineRows, codes: Int32Array): Pick<SplineRows, "first" | "values"> {
  const first = new Int32Array(codes.length);
  const values = new Float64Array(4 * codes.length);
  for (let row = 0; row < codes.length; row++) {
    first[row] = distinct.first[codes[row]];
    for (let k = 0; k < 4; k++) values[4 * row + k] = distinct.values[4 * codes[row] + k];
  }
  return { first, values };
}

/**
 * Splines of a curve per level, whose rows are alike where value and level are.
 *
 * @param alike rows of one curve. index per row, the position of its level, of which there are `count`.
 * @returns null where too few are alike.
 * @example repeatPerLevel(rows.alike, index, 11)?.width; // 11 times that of the one curve
 */
export function repeatPerLevel({ codes: values, rows }: AlikeRows, index: Int32Array, count: number): SplineRows | null {
  const distinct = rows.first.length;
  if (distinct * count > mostCells) return null;
  const codeOf = new Int32Array(distinct * count);
  const codes = new Int32Array(values.length);
  const cells: number[] = [];
  for (let row = 0; row < codes.length; row++) {
    const cell = index[row] * distinct + values[row];
    if (codeOf[cell] === 0) codeOf[cell] = cells.push(cell);
    codes[row] = codeOf[cell] - 1;
  }
  if (!isMany(cells.length, codes.length)) return null;
  const own = Int32Array.from(cells, (cell) => cell % distinct);
  const levels = Int32Array.from(cells, (cell) => Math.floor(cell / distinct));
  return repeatRows(splinesPerLevel({ ...rows, ...writeRows(rows, own) }, levels, count), codes);
}
