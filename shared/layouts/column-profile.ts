import { shareOf } from "./detected";
import { isGtin } from "./gtin";
import { isDayLike, isSerialDay } from "./read-day";
import { isNumberLike } from "./read-number";

/** What the values of one of the file's columns look like; shares are of those that are not empty. */
export type ColumnProfile = {
  position: number;
  /** Their name; "" where the file has none. */
  name: string;
  /** Values that are not empty, without blanks around them, in the file's order. */
  values: string[];
  emptyShare: number;
  days: number;
  serialDays: number;
  numbers: number;
  gtins: number;
  distinct: number;
};

/** Most of the values, so that a few wrong ones hide nothing. */
export const most = 0.8;

/**
 * Looks at each column of a file's records.
 *
 * @example profileColumns([["1.5"], ["2"]], ["units"])[0]?.numbers // 1
 */
export function profileColumns(records: readonly (readonly string[])[], names: readonly string[]): ColumnProfile[] {
  return names.map((name, position) => {
    const all = records.map((record) => record[position]?.trim() ?? "");
    const values = all.filter((value) => value !== "");
    return {
      position, name, values,
      emptyShare: shareOf(all, (value) => value === ""),
      days: shareOf(values, isDayLike),
      serialDays: shareOf(values, isSerialDay),
      numbers: shareOf(values, isNumberLike),
      gtins: shareOf(values, isGtin),
      distinct: new Set(values).size,
    };
  });
}

/** What most values of a column are, for comparing a header with them. */
export function typeOfValue(value: string): "day" | "number" | "text" | "empty" {
  const text = value.trim();
  if (text === "") return "empty";
  if (isDayLike(text)) return "day";
  return isNumberLike(text) ? "number" : "text";
}
