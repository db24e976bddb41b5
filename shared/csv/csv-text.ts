import { harmless } from "./harmless";

/** A cell of a table: text, a number, or nothing. */
export type CsvCell = string | number | null;
export type CsvTable = { columns: readonly string[]; rows: readonly (readonly CsvCell[])[] };

const lineEnd = "\r\n";
const needsQuotes = /[",\r\n]|^\s|\s$/;

/** Texts are made harmless to spreadsheets; numbers stay numbers, so that sums still work. */
function textOf(cell: CsvCell): string {
  if (cell === null) return "";
  const text = typeof cell === "number" ? String(cell) : harmless(cell);
  return needsQuotes.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/**
 * Cells as a line of CSV (RFC 4180), without its end.
 *
 * @example csvLine(["S1", 12.5, "=1+1", null]) // "S1,12.5,'=1+1,"
 */
export function csvLine(cells: readonly CsvCell[]): string {
  return cells.map(textOf).join(",");
}

/**
 * Lines of CSV as they stand in a file, each with its end; nothing where there are none.
 *
 * @example csvLines([["S1", 1], ["S2", 2]]) // "S1,1\r\nS2,2\r\n"
 */
export function csvLines(rows: readonly (readonly CsvCell[])[]): string {
  return rows.map((cells) => csvLine(cells) + lineEnd).join("");
}

/** A table as CSV, the header first; without an end behind the last line. */
export function csvText({ columns, rows }: CsvTable): string {
  return [columns, ...rows].map(csvLine).join(lineEnd);
}

/** Put first in a file, it tells spreadsheets that the text is UTF-8. */
export const byteOrderMark = "\uFEFF";
