import Papa from "papaparse";

export type CsvCell = string | number | null;
export type CsvTable = { columns: readonly string[]; rows: readonly (readonly CsvCell[])[] };

/**
 * A table as CSV (RFC 4180). Text that a spreadsheet would run as a formula (it begins with = + - @, tab or
 * return) gets an apostrophe in front; numbers stay numbers, so that sums still work.
 */
export const toCsv = ({ columns, rows }: CsvTable): string =>
  Papa.unparse({ fields: [...columns], data: rows.map((row) => [...row]) }, { escapeFormulae: true, newline: "\r\n" });
