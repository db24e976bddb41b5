import { extractColumns } from "@shared/contract/extract-columns";
import { mappableColumns } from "@shared/contract/layouts";
import type { ColumnSource, Layout } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";

type FileColumn = Pick<LayoutPreview["fileColumns"][number], "name" | "position" | "proposed">;

/** Which column of ours the file's column becomes; null where it is not used. */
export const oursAt = ({ mapping, theirColumns }: Layout, position: number): string | null => {
  const isOf = (source: ColumnSource) =>
    source.from === "position" ? source.position === position : source.from === "name" && source.name === theirColumns[position];
  return Object.entries(mapping).find(([, source]) => isOf(source))?.[0] ?? null;
};

/** By name where one column alone has it, so that the layout holds in another order too. */
const sourceAt = ({ theirColumns, hasHeader }: Layout, position: number): ColumnSource => {
  const name = theirColumns[position] ?? "";
  const isUnique = hasHeader && name !== "" && theirColumns.filter((other) => other === name).length === 1;
  return isUnique ? { from: "name", name } : { from: "position", position };
};

const without = (mapping: Layout["mapping"], columns: readonly (string | null)[]) =>
  Object.fromEntries(Object.entries(mapping).filter(([column]) => !columns.includes(column)));

/** Makes a file's column one of ours, or none; ours comes from one place only. */
export const assign = (layout: Layout, position: number, ours: string | null): Layout => {
  const mapping = without(layout.mapping, [oursAt(layout, position), ours]);
  return { ...layout, mapping: ours === null ? mapping : { ...mapping, [ours]: sourceAt(layout, position) } };
};

/** The same value in every row; null takes it away. */
export const fix = (layout: Layout, ours: string, value: string | null): Layout => {
  const mapping = without(layout.mapping, [ours]);
  return { ...layout, mapping: value === null ? mapping : { ...mapping, [ours]: { from: "value", value } } };
};

/** Columns of ours that hold the same value in every row. */
export const fixedColumns = ({ mapping }: Layout): { column: string; value: string }[] =>
  Object.entries(mapping).flatMap(([column, source]) => (source.from === "value" ? [{ column, value: source.value }] : []));

/** Columns of ours that nothing in the file becomes, those that are needed first. */
export const openColumns = ({ kind, mapping }: Layout): { column: string; isNeeded: boolean }[] => {
  const needed = new Set(extractColumns[kind].filter((column) => column.needed).map(({ name }) => name));
  return mappableColumns(kind)
    .filter((column) => !(column in mapping))
    .map((column) => ({ column, isNeeded: needed.has(column) }))
    .sort((one, other) => Number(other.isNeeded) - Number(one.isNeeded));
};

/** Takes the file's columns as another reading finds them, and what is proposed for them. */
export const adoptColumns = (layout: Layout, fileColumns: readonly FileColumn[]): Layout => {
  const bare: Layout = { ...layout, theirColumns: fileColumns.map(({ name }) => name), mapping: {} };
  return fileColumns.reduce((made, { position, proposed }) => (proposed ? assign(made, position, proposed) : made), bare);
};

/** Only from here on may a proposal be called more than a guess. */
const likely = 0.75;
const certain = 0.95;

/** How sure a proposal is, in a word. */
export const surenessWord = (confidence: number | undefined): string => {
  if (confidence === undefined) return "proposed";
  if (confidence >= certain) return "certain";
  return confidence >= likely ? "likely" : "a guess";
};

export type WarningPlace = "encoding" | "separator" | "header" | "numbers" | "dates" | "weekDay" | "tax" | "columns";

const placesByCode: Record<string, WarningPlace> = {
  "encoding-guessed": "encoding",
  "no-separator": "separator",
  "separator-ambiguous": "separator",
  "separator-line": "separator",
  "ragged-rows": "separator",
  "header-ambiguous": "header",
  "lines-above-header": "header",
  "numbers-ambiguous": "numbers",
  "dates-ambiguous": "dates",
  "dates-mixed": "dates",
  "week-day-ambiguous": "weekDay",
  "not-weekly": "weekDay",
  "tax-guessed": "tax",
};

/** The setting a warning speaks of, beside which it stands. */
export const warningPlace = (code: string): WarningPlace => placesByCode[code] ?? "columns";
