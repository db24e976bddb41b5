import type { CsvCell } from "@/lib/csv";

/** The numbers a chart draws: exact for export, written for people on the screen. */
export type ChartTable = {
  columns: readonly string[];
  rows: readonly (readonly CsvCell[])[];
  /** How to write a cell of each column; by default as it is. */
  formats?: readonly (((value: number) => string) | undefined)[];
};

export const writeCell = (table: ChartTable, cell: CsvCell, column: number): string => {
  if (cell === null) return "–";
  const format = table.formats?.[column];
  return typeof cell === "number" && format ? format(cell) : String(cell);
};
