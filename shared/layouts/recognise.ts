import { dayOfWeek } from "../calendar";
import type { Encoding, Layout } from "../contract/layouts";
import { applyLayout } from "./apply-layout";
import { detectEncoding, isAscii } from "./detect-encoding";
import { headBytes, namesIn, shareOf } from "./detected";
import { normalName } from "./normal-name";
import { readHead, recordsOf } from "./read-head";

export type Recognised = {
  /** Its place in the list given. */
  index: number;
  layout: Layout;
  /** Whether the file has the columns in the order in which the layout knows them. */
  order: "same" | "other";
  /** The file's own header, for `applyLayout`. */
  theirColumns: string[];
};

/** Rows by which it is seen whether values can be read. */
const rowsTried = 200;
/** A layout by which half of the rows cannot be read, or have weeks that are none of the chain, is not the one. */
const mostUnreadable = 0.5;
/** Without names only values can tell, so nearly all must do. */
const mostUnreadableWithoutHeader = 0.1;

/**
 * The saved layout that fits a new file: written in its encoding and separator, with the same names in its header, in the same
 * or another order (without a header: as many columns, whose values can be read). Of several the one by which most rows can
 * be read, then by which most weeks begin on the chain's day (most must), in the same order before another, then the first in the list.
 *
 * @param weekStart the day on which the chain's weeks begin, 0 Sunday to 6 Saturday
 * @returns null where none fits.
 * @example recognise([layout], bytes)?.order // "same"
 */
export function recognise(layouts: readonly Layout[], head: Uint8Array, { weekStart }: { weekStart?: number } = {}): Recognised | null {
  const encodings = possibleEncodings(head);
  const fits = layouts.flatMap((layout, index) => {
    const fit = encodings.includes(layout.encoding) ? fitOf(layout, head) : null;
    const misplaced = fit ? misplacedShare(fit, layout, weekStart) : 0;
    return fit && misplaced <= mostUnreadable ? [{ index, layout, misplaced, ...fit }] : [];
  });
  const [best] = fits.sort((one, other) =>
    one.unreadable - other.unreadable || one.misplaced - other.misplaced || rank(one.order) - rank(other.order) || one.index - other.index);
  return best ? { index: best.index, layout: best.layout, order: best.order, theirColumns: best.theirColumns } : null;
}

const rank = (order: Recognised["order"]) => (order === "same" ? 0 : 1);

/** A head of ASCII alone can be the beginning of UTF-8 as well as of Windows-1252. */
function possibleEncodings(head: Uint8Array): Encoding[] {
  return isAscii(head.subarray(0, headBytes)) && !head.subarray(0, headBytes).includes(0) ? ["utf-8", "windows-1252"] : [detectEncoding(head).value];
}

type Fit = { order: Recognised["order"]; theirColumns: string[]; rows: readonly string[][]; unreadable: number };

function fitOf(layout: Layout, head: Uint8Array): Fit | null {
  const text = readHead(head, layout.encoding, layout.linesAbove);
  const [first, ...below] = text ? recordsOf(text, layout.separator) : [];
  if (!first) return null;
  if (!layout.hasHeader) return fitByValues(layout, [first, ...below]);
  const theirColumns = namesIn(first);
  const order = orderOf(theirColumns, layout);
  if (!order) return null;
  const unreadable = unreadableShare(layout, theirColumns, below);
  return unreadable > mostUnreadable ? null : { order, theirColumns, rows: below, unreadable };
}

function fitByValues(layout: Layout, records: readonly string[][]): Fit | null {
  const { length: width } = layout.theirColumns;
  if (shareOf(records.slice(0, rowsTried), (record) => record.length === width) < 1 - mostUnreadableWithoutHeader) return null;
  const unreadable = unreadableShare(layout, layout.theirColumns, records);
  return unreadable > mostUnreadableWithoutHeader ? null : { order: "same", theirColumns: layout.theirColumns, rows: records, unreadable };
}

/** Names in other case, accents or blanks are the same names. */
function orderOf(theirColumns: readonly string[], layout: Layout): Recognised["order"] | null {
  const [file, saved] = [theirColumns.map(normalName), layout.theirColumns.map(normalName)];
  if (file.length !== saved.length) return null;
  if (file.every((name, at) => name === saved[at])) return "same";
  // A column known by its position alone cannot be found in another order.
  const needsPositions = Object.values(layout.mapping).some(({ from }) => from === "position");
  const [sortedFile, sortedSaved] = [[...file].sort(), [...saved].sort()];
  return !needsPositions && sortedFile.every((name, at) => name === sortedSaved[at]) ? "other" : null;
}

/** The share of rows whose week, as the layout reads it, begins on another day than the chain's. */
function misplacedShare({ theirColumns, rows }: Fit, layout: Layout, weekStart: number | undefined): number {
  const { columns, read } = applyLayout(layout, theirColumns);
  const week = columns.indexOf("week");
  if (weekStart === undefined || week === -1) return 0;
  return shareOf(rows.slice(0, rowsTried), (row) => {
    const value = read(row).values[week] ?? "";
    return /^\d{4}-\d{2}-\d{2}$/.test(value) && dayOfWeek(value) !== weekStart;
  });
}

/**
 * The share of a head's first rows that have a value which a layout cannot read; 0 where it has no rows.
 *
 * @example unreadableRows(layout, bytes) // 0
 */
export function unreadableRows(layout: Layout, head: Uint8Array): number {
  const text = readHead(head, layout.encoding, layout.linesAbove);
  const rows = text ? recordsOf(text, layout.separator).slice(layout.hasHeader ? 1 : 0) : [];
  return unreadableShare(layout, layout.theirColumns, rows);
}

function unreadableShare(layout: Layout, theirColumns: readonly string[], rows: readonly string[][]): number {
  const { read } = applyLayout(layout, theirColumns);
  return shareOf(rows.slice(0, rowsTried), (row) => read(row).problems.length > 0);
}
