import { CalendarError, parseWeek, type ChainCalendar } from "@shared/calendar";
import type { Layout } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { applyLayout, decodeHead, detectLayout, headBytes, LayoutError, missingColumns, type DetectedLayout, type LayoutReader } from "@shared/layouts";
import { readRecords, type CsvRecord } from "../read/read-records";

const rowsShown = 20;
/** Longer values are cut: a page shows them, nobody loads them from here. */
const longestShown = 200;

/**
 * A file's first rows as they stand and as a layout reads them, with what is wrong with them. The file's columns, and what is
 * proposed for them, follow from the layout's encoding, separator and header alone, so that they are right while it is being made.
 *
 * @param head the file's first 64 KiB, unpacked
 */
export async function previewLayout(head: Uint8Array, { layout, calendar }: { layout: Layout; calendar: ChainCalendar }): Promise<LayoutPreview> {
  const { kind, encoding, separator, linesAbove, hasHeader } = layout;
  const free = detectLayout(head, kind, { weekStart: calendar.weekStart });
  const detected = isSameTable(free.layout, layout) ? free : detectLayout(head, kind, { weekStart: calendar.weekStart, given: { encoding, separator, linesAbove, hasHeader } });
  const records = await firstRecords(head, layout);
  const rows = records.slice(hasHeader ? 1 : 0).slice(0, rowsShown);
  const { reader, warnings } = readerOf(layout, detected.layout.theirColumns);
  return {
    fileColumns: detected.columns.map(({ theirName, ...column }) => ({ name: theirName, ...column })),
    columns: [...reader.columns],
    rows: rows.map((record) => previewRow(record, reader, calendar)),
    warnings: [...warnings, ...encodingWarnings(head, layout), ...ofThisLayout(detected, layout)],
    missing: missingColumns(layout),
  };
}

/** Whether a layout cuts a file into the same columns and rows as another. */
const isSameTable = (one: Layout, other: Layout): boolean =>
  one.encoding === other.encoding && one.separator === other.separator && one.linesAbove === other.linesAbove && one.hasHeader === other.hasHeader;

/** A header and the rows shown; the line at the end of a head that goes on may be half a one. */
async function firstRecords(head: Uint8Array, { encoding, separator, linesAbove }: Layout): Promise<CsvRecord[]> {
  const text = decodeHead(head, encoding)?.replaceAll("\r\n", "\n").replaceAll("\r", "\n") ?? "";
  const records: CsvRecord[] = [];
  for await (const batch of readRecords(piece(text), { separator, linesAbove })) records.push(...batch);
  const isCut = head.length >= headBytes && records.length > 1;
  return records.slice(0, isCut ? -1 : undefined).slice(0, rowsShown + 1);
}

async function* piece(text: string): AsyncGenerator<string> {
  yield text;
}

/** Columns that the mapping names and the file lacks are said, and the others shown. */
function readerOf(layout: Layout, theirColumns: readonly string[]): { reader: LayoutReader; warnings: LayoutPreview["warnings"] } {
  try {
    return { reader: applyLayout(layout, theirColumns), warnings: [] };
  } catch (error) {
    if (!(error instanceof LayoutError)) throw error;
    const mapping = Object.fromEntries(Object.entries(layout.mapping).filter(([column, source]) => fits({ ...layout, mapping: { [column]: source } }, theirColumns)));
    return { reader: applyLayout({ ...layout, mapping }, theirColumns), warnings: [{ code: "columns-not-in-file", message: error.message }] };
  }
}

function fits(layout: Layout, theirColumns: readonly string[]): boolean {
  try {
    return applyLayout(layout, theirColumns).columns.length > 0;
  } catch {
    return false;
  }
}

function previewRow({ line, fields, text = "" }: CsvRecord, reader: LayoutReader, calendar: ChainCalendar): LayoutPreview["rows"][number] {
  if (!fields) {
    const reason = "Quotes in this line do not close, or do not close before the next column";
    return { line, fields: [text], values: reader.columns.map(() => ""), problems: [{ column: "", value: text, reason }] };
  }
  const { values, problems } = reader.read(fields);
  const week = reader.columns.indexOf("week");
  const misplaced = week === -1 ? [] : weekProblems({ value: values[week] ?? "", shown: fields[reader.positions[week] ?? -1] ?? "", calendar });
  const shown = (value: string) => value.slice(0, longestShown);
  return {
    line, fields: fields.map(shown), values: values.map(shown),
    problems: [...problems, ...misplaced].map(({ value, ...problem }) => ({ ...problem, value: shown(value) })),
  };
}

/** A week is read, but is none of the chain's. */
function weekProblems({ value, shown, calendar }: { value: string; shown: string; calendar: ChainCalendar }) {
  if (value === "") return [];
  try {
    parseWeek(calendar, value);
    return [];
  } catch (error) {
    if (!(error instanceof CalendarError)) throw error;
    return [{ column: "week", value: shown.trim(), reason: error.message.replace(/\.$/, "") }];
  }
}

function encodingWarnings(head: Uint8Array, { encoding }: Layout): LayoutPreview["warnings"] {
  if (decodeHead(head, encoding) !== null) return [];
  return [{ code: "encoding-does-not-fit", message: "The file's bytes are no UTF-8: choose another encoding." }];
}

/** Warnings about what was worked out hold for a layout only where it says the same; what is missing is said by itself. */
function ofThisLayout({ warnings, layout: detected }: DetectedLayout, layout: Layout): LayoutPreview["warnings"] {
  const settled: Record<string, boolean> = {
    "column-not-found": true,
    "dates-ambiguous": detected.dateOrder !== layout.dateOrder,
    "numbers-ambiguous": detected.decimal !== layout.decimal,
    "week-day-ambiguous": detected.weekDay !== layout.weekDay,
    "tax-guessed": detected.tax !== layout.tax,
  };
  return warnings.filter(({ code }) => !settled[code]);
}
