import { EngineError } from "../errors";
import type { ModelData } from "../types";

/** Quotes names for a message: "price", "depth". */
export const quoted = (names: readonly string[]): string => names.map((name) => `"${name}"`).join(", ");

/** A column as given. @throws EngineError column-missing. */
export function rawColumn(data: ModelData, name: string, role: string): ModelData[string] {
  if (!Object.hasOwn(data, name)) {
    throw new EngineError("column-missing", `Column "${name}" (${role}) is missing; the data has ${quoted(Object.keys(data)) || "no columns"}.`);
  }
  return data[name];
}

/**
 * Number of rows, which all the columns named must share.
 *
 * @param columns pairs of column name and the role it plays, for messages.
 * @throws EngineError column-missing, length-mismatch.
 * @example rowCount(data, [["units", "response"], ["price", "smooth"]]);
 */
export function rowCount(data: ModelData, columns: readonly (readonly [name: string, role: string])[]): number {
  let count = -1;
  let firstName = "";
  for (const [name, role] of columns) {
    const { length } = rawColumn(data, name, role);
    if (count < 0) {
      count = length;
      firstName = name;
    } else if (length !== count) {
      throw new EngineError("length-mismatch", `Column "${name}" has ${length} rows, "${firstName}" has ${count}; all columns must have the same length.`);
    }
  }
  return Math.max(count, 0);
}

/** Products of three values must stay finite. */
const largestMagnitude = 1e50;

function isWithin(values: Float64Array): boolean {
  for (let row = 0; row < values.length; row++) if (!(Math.abs(values[row]) <= largestMagnitude)) return false;
  return true;
}

/**
 * A column of finite numbers, of magnitude up to 1e50.
 *
 * @param role what the column is for, for messages.
 * @throws EngineError column-missing, column-kind, value-not-finite (with row, counted from 1, and value).
 * @example numberColumn({ price: [1.99, 2.49] }, "price", "smooth"); // Float64Array
 */
export function numberColumn(data: ModelData, name: string, role: string): Float64Array {
  const raw = rawColumn(data, name, role);
  if (raw instanceof Float64Array && isWithin(raw)) return raw;
  const values = new Float64Array(raw.length);
  for (let row = 0; row < raw.length; row++) {
    const value = raw[row];
    if (typeof value !== "number") {
      throw new EngineError("column-kind", `Column "${name}" (${role}) must hold numbers; row ${row + 1} is ${JSON.stringify(value)}.`);
    }
    if (!(Math.abs(value) <= largestMagnitude)) {
      const rule = Number.isFinite(value) ? `within ${largestMagnitude} of 0` : "finite";
      throw new EngineError("value-not-finite", `Column "${name}" (${role}) must be ${rule}; row ${row + 1} is ${value}.`);
    }
    values[row] = value;
  }
  return values;
}

/**
 * A column of a covariate, or its natural logarithm.
 *
 * @throws EngineError as `numberColumn`; value-not-positive where a logarithm is asked for.
 * @example covariate({ price: [1, Math.E] }, { column: "price", log: true }, "linear"); // 0, 1
 */
export function covariate(data: ModelData, from: { column: string; log?: boolean }, role: string): Float64Array {
  const values = numberColumn(data, from.column, role);
  if (from.log !== true) return values;
  const logs = new Float64Array(values.length);
  for (let row = 0; row < values.length; row++) {
    if (!(values[row] > 0)) {
      throw new EngineError(
        "value-not-positive",
        `Column "${from.column}" (${role}, log) must be above 0 to have a logarithm; row ${row + 1} is ${values[row]}.`,
      );
    }
    logs[row] = Math.log(values[row]);
  }
  return logs;
}

/**
 * A column of level names; numbers are taken by their shortest decimal form, so 1 is "1".
 *
 * @throws EngineError column-missing, column-kind, value-not-finite.
 * @example levelColumn({ deal: [0, 1] }, "deal", "factor"); // ["0", "1"]
 */
export function levelColumn(data: ModelData, name: string, role: string): string[] {
  const raw = rawColumn(data, name, role);
  const levels = new Array<string>(raw.length);
  for (let row = 0; row < raw.length; row++) levels[row] = levelName(raw[row], { column: name, role, row });
  return levels;
}

/**
 * Name of one row's level.
 *
 * @param at.row counted from 0.
 * @throws EngineError column-kind, value-not-finite.
 * @example levelName(1, { column: "deal", role: "factor", row: 0 }); // "1"
 */
export function levelName(value: unknown, at: { column: string; role: string; row: number }): string {
  if (typeof value === "string") return value;
  const { column, role, row } = at;
  if (typeof value !== "number") {
    throw new EngineError("column-kind", `Column "${column}" (${role}) must hold text or numbers; row ${row + 1} is ${JSON.stringify(value)}.`);
  }
  if (!Number.isFinite(value)) {
    throw new EngineError("value-not-finite", `Column "${column}" (${role}) must be finite; row ${row + 1} is ${value}.`);
  }
  return String(value);
}
