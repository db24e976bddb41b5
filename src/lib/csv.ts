import { csvText, type CsvTable } from "@shared/csv";

export type { CsvCell, CsvTable } from "@shared/csv";

/** A table as CSV (RFC 4180) that is safe to open in a spreadsheet. */
export const toCsv = (table: CsvTable): string => csvText(table);
