import { EngineError } from "../errors";
import type { SplineRows } from "../linalg/sparse-rows";
import type { ModelData } from "../types";
import { levelName, quoted, rawColumn } from "./columns";

/**
 * The levels of a column in sorted order (numbers by size), and the position of each row's. O(n): a value is looked at
 * closely the first time it is met only.
 *
 * @throws EngineError column-missing, column-kind, value-not-finite.
 * @example learnLevels({ deal: [1, 0, 1] }, "deal", "factor"); // levels "0", "1"; index 1, 0, 1
 */
export function learnLevels(data: ModelData, column: string, role: string): { levels: string[]; index: Int32Array } {
  const raw = rawColumn(data, column, role);
  const codes = new Map<string | number, number>();
  const met: string[] = [];
  const index = new Int32Array(raw.length);
  // Rows mostly come store by store and product by product: the level before is asked first.
  let before: unknown = met;
  let code = 0;
  for (let row = 0; row < raw.length; row++) {
    const value = raw[row];
    if (value !== before) {
      before = value;
      const known = codes.get(value);
      code = known ?? met.push(levelName(value, { column, role, row })) - 1;
      if (known === undefined) codes.set(value, code);
    }
    index[row] = code;
  }
  // A number and its text are the same level.
  const levels = [...new Set(met)].sort(byNumberThenText);
  const positions = levelPositions(levels, met);
  if (positions.some((position, order) => position !== order)) for (let row = 0; row < index.length; row++) index[row] = positions[index[row]];
  return { levels, index };
}

/** Numbers first, by size: compared with one another both ways, "10", "1a" and "9" would go round in a circle. */
function byNumberThenText(left: string, right: string): number {
  const [one, other] = [numberIn(left), numberIn(right)];
  if (one !== null && other !== null && one !== other) return one - other;
  if ((one === null) !== (other === null)) return one === null ? 1 : -1;
  return left < right ? -1 : Number(left > right);
}

/** The finite number that a name stands for; null for words. */
function numberIn(name: string): number | null {
  const value = name.trim() === "" ? Number.NaN : Number(name);
  return Number.isFinite(value) ? value : null;
}

/**
 * Position of each row's level, -1 where it is not among them. O(n).
 *
 * @example levelPositions(["a", "b"], ["b", "c"]); // 1, -1
 */
export function levelPositions(levels: readonly string[], perRow: readonly string[]): Int32Array {
  const positions = new Map(levels.map((level, position) => [level, position]));
  const index = new Int32Array(perRow.length);
  for (let row = 0; row < index.length; row++) index[row] = positions.get(perRow[row]) ?? -1;
  return index;
}

/**
 * Position of each row's level, which must be among those of the fit.
 *
 * @throws EngineError level-unknown, with the level and its row.
 * @example knownPositions({ column: "promotion", levels: ["none"] }, ["none"]); // 0
 */
export function knownPositions(of: { column: string; levels: readonly string[] }, perRow: readonly string[]): Int32Array {
  const index = levelPositions(of.levels, perRow);
  const row = index.indexOf(-1);
  if (row < 0) return index;
  throw new EngineError(
    "level-unknown",
    `Level "${perRow[row]}" of factor "${of.column}" (row ${row + 1}) was never seen in the fit; seen were ${quoted(of.levels)}.`,
  );
}

/**
 * Splines of one curve as those of a curve per level: column level x size + k. Rows of no level (-1) are zero.
 *
 * @param rows of a curve of `rows.width` splines. Not changed.
 * @param index per row, the position of its level.
 * @example splinesPerLevel(rows, Int32Array.of(0, 1), 2).width; // 2 x rows.width
 */
export function splinesPerLevel(rows: SplineRows, index: Int32Array, count: number): SplineRows {
  const values = index.includes(-1) ? rows.values.map((value, at) => (index[at >> 2] < 0 ? 0 : value)) : rows.values;
  const first = new Int32Array(index.length);
  for (let row = 0; row < first.length; row++) first[row] = index[row] < 0 ? 0 : index[row] * rows.width + rows.first[row];
  return { storage: "spline", width: count * rows.width, wraps: false, first, values };
}
