export { byteOrderMark, csvLine, csvLines, csvText } from "./csv-text";
export type { CsvCell, CsvTable } from "./csv-text";
export { harmless, withoutGuard } from "./harmless";
