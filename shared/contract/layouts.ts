import { z } from "zod";
import { extractColumns } from "./extract-columns";
import { extractKindSchema, type ExtractKind } from "./extract-kinds";

export const encodingSchema = z.enum(["utf-8", "utf-16le", "utf-16be", "windows-1252"]);
export type Encoding = z.infer<typeof encodingSchema>;

export const separatorSchema = z.enum([",", ";", "\t", "|"]);
export type Separator = z.infer<typeof separatorSchema>;

export const decimalSchema = z.enum([".", ","]);
export const thousandsSchema = z.enum(["", ",", ".", " ", "'"]);
export type NumberFormat = { decimal: z.infer<typeof decimalSchema>; thousands: z.infer<typeof thousandsSchema> };

/** How days with the year at the end are written; days that begin with the year are read under any order. */
export const dateOrderSchema = z.enum(["iso", "dmy", "mdy"]);
export type DateOrder = z.infer<typeof dateOrderSchema>;

/** Which day of a week a file writes for it. */
export const weekDaySchema = z.enum(["first", "last"]);
export type WeekDay = z.infer<typeof weekDaySchema>;

/** Where the values of a column of ours come from. */
export const columnSourceSchema = z.discriminatedUnion("from", [
  z.object({ from: z.literal("name"), name: z.string().min(1).max(200) }),
  /** Counted from 0. */
  z.object({ from: z.literal("position"), position: z.number().int().min(0).max(499) }),
  /** The same in every row, in our own writing: a day as YYYY-MM-DD, a number with a point. */
  z.object({ from: z.literal("value"), value: z.string().max(200) }),
]);
export type ColumnSource = z.infer<typeof columnSourceSchema>;

const wordsSchema = z.array(z.string().trim().min(1).max(60)).max(60);

/** Words of a file and what they mean, in any case; `feature` to `other` also split a single promotion word. */
export const wordListsSchema = z.object({
  yes: wordsSchema, no: wordsSchema,
  none: wordsSchema, feature: wordsSchema, display: wordsSchema, feature_and_display: wordsSchema,
  price_cut: wordsSchema, multi_buy: wordsSchema, coupon: wordsSchema, other: wordsSchema,
});
export type WordLists = z.infer<typeof wordListsSchema>;

/** A column beside our own: one word for the whole promotion, from which feature, display and mechanic are made. */
export const promotionColumn = "promotion";

/**
 * The columns that a layout can map for a kind of file.
 *
 * @example mappableColumns("stores") // ["store", "name", "region", "opened", "closed"]
 */
export function mappableColumns(kind: ExtractKind): string[] {
  const names = extractColumns[kind].map(({ name }) => name);
  return kind === "sales" ? [...names, promotionColumn] : names;
}

const layoutFields = z.object({
  kind: extractKindSchema,
  encoding: encodingSchema,
  separator: separatorSchema,
  /** Lines above the columns' names (or above the first row), such as a title, which are passed over. */
  linesAbove: z.number().int().min(0).max(50).default(0),
  hasHeader: z.boolean(),
  /** The file's columns in its order, by which it is known again; "" for each column of a file without a header. */
  theirColumns: z.array(z.string().max(200)).min(1).max(500),
  decimal: decimalSchema,
  /** "" where thousands are not set apart; " " stands for every kind of blank, "'" for every apostrophe. */
  thousands: thousandsSchema,
  dateOrder: dateOrderSchema,
  weekDay: weekDaySchema,
  /** Our column -> theirs. */
  mapping: z.record(z.string().max(60), columnSourceSchema),
  words: wordListsSchema,
  /** What it means that a product has no row in a week in which it is listed. */
  missingMeans: z.enum(["zero", "unknown"]),
  /** Whether prices and net sales of the file hold the tax. */
  tax: z.enum(["included", "excluded"]),
});

/** How the files of one source are written, and which of their columns are ours. */
export const layoutSchema = layoutFields.superRefine((layout, context) => {
  const refuse = (path: (string | number)[], message: string) => context.addIssue({ code: "custom", path, message });
  if (layout.decimal === layout.thousands) refuse(["thousands"], "Decimals and thousands cannot have the same sign.");
  refuseSources(layout, refuse);
  refuseWords(layout.words, refuse);
});
export type Layout = z.infer<typeof layoutFields>;

type Refuse = (path: (string | number)[], message: string) => void;

function refuseSources({ kind, hasHeader, theirColumns, mapping }: Layout, refuse: Refuse): void {
  const ours = new Set(mappableColumns(kind));
  for (const [column, source] of Object.entries(mapping)) {
    if (!ours.has(column)) refuse(["mapping", column], `A ${kind} file has no column "${column}".`);
    else if (source.from === "name" && !hasHeader) refuse(["mapping", column], "A file without a header has no names: give the position.");
    else if (source.from === "name" && !theirColumns.includes(source.name)) refuse(["mapping", column], `The file has no column "${source.name}".`);
    else if (source.from === "position" && source.position >= theirColumns.length) {
      refuse(["mapping", column], `The file has ${theirColumns.length} columns: position ${source.position} lies behind the last.`);
    }
  }
}

/** A word means one thing: yes or no, and one kind of promotion. */
function refuseWords({ yes, no, ...promotion }: WordLists, refuse: Refuse): void {
  for (const lists of [{ yes, no }, promotion]) {
    const seen = new Map<string, string>();
    for (const [meaning, words] of Object.entries(lists)) {
      for (const word of words) {
        const known = seen.get(word.trim().toLowerCase());
        if (known && known !== meaning) refuse(["words", meaning], `"${word}" already means ${known}.`);
        seen.set(word.trim().toLowerCase(), meaning);
      }
    }
  }
}
