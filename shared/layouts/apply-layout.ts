import { addDays } from "../calendar";
import type { ColumnSource, Layout } from "../contract/layouts";
import { mappableColumns, promotionColumn } from "../contract/layouts";
import { columnType } from "./column-types";
import { LayoutError } from "./layout-error";
import { normalName } from "./normal-name";
import { readDay, readWeek } from "./read-day";
import { numberReader } from "./read-number";
import { remembered, wordReader, type Promotion, type WordReader } from "./read-words";

/** A value that a layout cannot read. */
export type FieldProblem = { column: string; value: string; reason: string };

/** A record in our columns. */
export type OurRecord = {
  /** In the order of the reader's columns, in our own writing; "" where the file has none, or none that can be read. */
  values: string[];
  problems: FieldProblem[];
};

export type LayoutReader = {
  /** Names of our columns that come from the file or are fixed; `promotion` is split and not among them. */
  columns: readonly string[];
  /** Where each of them stands in the file; null for one that is fixed. */
  positions: readonly (number | null)[];
  read: (fields: readonly string[]) => OurRecord;
};

/** What reads one value of ours from a record; answers its text, or what is wrong with it. */
type Cell = (fields: readonly string[]) => string | { value: string; reason: string };
type Reading = { text: string } | { reason: string };

/**
 * A reader of a file's records under a layout: from the fields as they stand to our columns, in our order, as our own extract writes them
 * (numbers with a point, days as YYYY-MM-DD, 0 and 1, our mechanics; codes and names as they are). Last days of weeks become
 * first days; ISO weeks stay weeks; a promotion word becomes feature, display and mechanic, of which a column of its own
 * is preferred. A value that cannot be read is a problem, never a guess.
 *
 * @param theirColumns the header of the file at hand, where it may have the columns in another order
 * @throws LayoutError "missing-columns", naming mapped columns that the header lacks.
 * @example applyLayout(layout).read(["07.06.2026", "1.234,5"]).values // ["2026-06-07", "1234.5"]
 */
export function applyLayout(layout: Layout, theirColumns: readonly string[] = layout.theirColumns): LayoutReader {
  const words = wordReader(layout.words);
  const sources = mappableColumns(layout.kind).flatMap((column) => {
    const source = layout.mapping[column];
    return source ? [{ column, source: located(source, theirColumns) }] : [];
  });
  const missing = sources.flatMap(({ source }) => ("missing" in source ? [source.missing] : []));
  if (missing.length > 0) {
    throw new LayoutError("missing-columns", `The file lacks columns that its layout reads: ${missing.join(", ")}.`);
  }
  const cells = new Map<string, Cell>();
  const positions = new Map<string, number | null>();
  for (const { column, source } of sources) {
    if (column === promotionColumn || "missing" in source) continue;
    positions.set(column, "value" in source ? null : source.position);
    cells.set(column, "value" in source ? () => source.value : cellOf({ column, position: source.position, read: valueReader(column, layout, words) }));
  }
  const promotion = sources.find(({ column }) => column === promotionColumn)?.source;
  if (promotion && !("missing" in promotion)) addPromotion(cells, promotion, words);
  const fromPromotion = promotion && "position" in promotion ? promotion.position : null;
  const columns = [...cells.keys()];
  const positionOf = (column: string) => positions.get(column) ?? (positions.has(column) ? null : fromPromotion);
  return { columns, positions: columns.map(positionOf), read: recordReader([...cells]) };
}

function recordReader(cells: readonly [string, Cell][]): LayoutReader["read"] {
  return (fields) => {
    const record: OurRecord = { values: [], problems: [] };
    for (const [column, cell] of cells) {
      const found = cell(fields);
      record.values.push(typeof found === "string" ? found : "");
      if (typeof found !== "string") record.problems.push({ column, ...found });
    }
    return record;
  };
}

type Located = { position: number } | { value: string } | { missing: string };

/** By the very name, else by the same name in other writing. */
function located(source: ColumnSource, theirColumns: readonly string[]): Located {
  if (source.from === "value") return { value: source.value };
  if (source.from === "position") return source.position < theirColumns.length ? source : { missing: `the one at position ${source.position}` };
  const exact = theirColumns.indexOf(source.name);
  const position = exact === -1 ? theirColumns.findIndex((name) => normalName(name) === normalName(source.name)) : exact;
  return position === -1 ? { missing: source.name } : { position };
}

type CellParts = { column: string; position: number; read: (text: string) => Reading };

function cellOf({ position, read }: CellParts): Cell {
  return (fields) => {
    const value = unwrapped(fields[position]?.trim() ?? "");
    if (value === "") return "";
    const reading = read(value);
    return "text" in reading ? reading.text : { value, reason: reading.reason };
  };
}

/** Spreadsheets are made to keep leading zeros by ="00123". */
function unwrapped(value: string): string {
  return value.startsWith('="') && value.endsWith('"') ? value.slice(2, -1) : value;
}

const orReason = (text: string | null, reason: string): Reading => (text === null ? { reason } : { text });

function valueReader(column: string, layout: Layout, words: WordReader): (text: string) => Reading {
  const number = numberReader(layout);
  const notNumber = `The value is not a number as the layout has them (decimals by "${layout.decimal}"${layout.thousands && `, thousands by "${layout.thousands}"`})`;
  switch (columnType(column)) {
    case "week":
      return remembered((text) => weekOf(text, layout));
    case "day":
      return remembered((text) => dayOf(text, layout));
    case "number":
      return (text) => orReason(number(text), notNumber);
    case "share":
      return (text) => orReason(shareOf(text, number), notNumber);
    case "flag":
      return remembered((text) => orReason(words.flag(text), "The word is in neither of the layout's lists for yes and no"));
    case "mechanic":
      return remembered((text) => orReason(words.mechanic(text), unknownWord));
    default:
      return codeOf;
  }
}

const unknownWord = "The word is in none of the layout's lists of promotions";

function weekOf(text: string, layout: Layout): Reading {
  const reading = readWeek(text, layout.dateOrder);
  if ("problem" in reading) return { reason: reading.problem };
  if ("isoWeek" in reading) return { text: reading.isoWeek };
  return { text: layout.weekDay === "last" ? addDays(reading.day, -6) : reading.day };
}

function dayOf(text: string, { dateOrder }: Layout): Reading {
  const reading = readDay(text, dateOrder);
  if ("isoWeek" in reading) return { reason: "A week stands where a day is needed" };
  return "problem" in reading ? { reason: reading.problem } : { text: reading.day };
}

/** "21 %" is 0.21; moved by the text, so that no digit changes. */
function shareOf(text: string, number: (text: string) => string | null): string | null {
  if (!text.endsWith("%")) return number(text);
  const percent = number(text.slice(0, -1).trim());
  if (percent === null || percent.startsWith("-")) return null;
  const [whole = "", decimals = ""] = percent.split(".");
  const padded = whole.padStart(3, "0");
  const share = `${padded.slice(0, -2).replace(/^0+(?=\d)/, "")}.${padded.slice(-2)}${decimals}`;
  return share.replace(/\.?0+$/, "");
}

const shortened = /^\d[.,]\d+E\+\d{1,2}$/i;

function codeOf(text: string): Reading {
  return shortened.test(text) ? { reason: "A spreadsheet has shortened this number; its digits are lost. Format the column as text there" } : { text };
}

/** Adds what a promotion word says, where the file has no column of its own for it. */
function addPromotion(cells: Map<string, Cell>, source: { position: number } | { value: string }, words: WordReader): void {
  const textOf = (fields: readonly string[]) => ("value" in source ? source.value : (fields[source.position]?.trim() ?? ""));
  const parts: (keyof Promotion)[] = ["feature", "display", "mechanic"];
  const free = parts.filter((part) => !cells.has(part));
  free.forEach((part, at) => {
    cells.set(part, (fields) => {
      const value = textOf(fields);
      const promotion = words.promotion(value);
      if (promotion) return promotion[part];
      // One problem for the word, not one for each part of it.
      return at === 0 ? { value, reason: unknownWord } : "";
    });
  });
}
