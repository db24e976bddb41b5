import { extractColumns } from "../contract/extract-columns";
import type { ExtractKind } from "../contract/extract-kinds";
import { mappableColumns, type ColumnSource, type Encoding, type Layout, type Separator } from "../contract/layouts";
import { most, profileColumns, type ColumnProfile } from "./column-profile";
import { defaultWords } from "./default-words";
import { detectDateOrder, detectWeekDay } from "./detect-days";
import { detectEncoding } from "./detect-encoding";
import { detectHeader } from "./detect-header";
import { detectLinesAbove } from "./detect-lines-above";
import { detectNumbers } from "./detect-numbers";
import { commonest, detectSeparator } from "./detect-separator";
import { detectTax } from "./detect-tax";
import { longestName, mostColumns, namesIn, shareOf, type Detected, type LayoutWarning } from "./detected";
import { mappingWarnings } from "./mapping-warnings";
import { proposeByValues } from "./propose-by-values";
import { knownNames, proposeByName, type Proposal } from "./propose-mapping";
import { readHead, recordsOf, withoutLines, type HeadText } from "./read-head";
import { wordReader } from "./read-words";

/** One of the file's columns, and what it is taken for. */
export type DetectedColumn = {
  theirName: string; position: number; samples: string[]; proposed: string | null; why: string;
  /** How sure the proposal is: 1 certain, 0.5 a guess; absent where nothing is proposed. */
  confidence?: number;
};

/** How sure each part of a detected layout is: 1 certain, 0.5 a guess, 0 nothing found. */
export type LayoutConfidence = Record<"encoding" | "separator" | "header" | "numbers" | "dates" | "weekDay" | "mapping", number>;

export type DetectedLayout = { layout: Layout; confidence: LayoutConfidence; columns: DetectedColumn[]; warnings: LayoutWarning[] };

const mostSamples = 5;

export type DetectionOptions = {
  /** Our columns that may be proposed. */
  knownColumns?: readonly string[];
  /** The day on which the chain's weeks begin, 0 Sunday to 6 Saturday: it tells first days from last ones. */
  weekStart?: number;
  /** What a person has set; only the rest is worked out. */
  given?: Partial<Pick<Layout, "encoding" | "separator" | "linesAbove" | "hasHeader" | "decimal" | "thousands" | "dateOrder">>;
};

const set = <Value>(value: Value): Detected<Value> => ({ value, confidence: 1, warnings: [] });

/**
 * Works out how a file is written and which of its columns are ours, from its first 64 KiB alone. The same head always gives
 * the same answer. What a file cannot tell stays at what is usual: a missing row is unknown, tax is included.
 *
 * @param head the file's first bytes, unpacked; 64 KiB or more mean that it goes on
 * @example detectLayout(bytes, "sales").layout.separator // ";"
 */
export function detectLayout(head: Uint8Array, kind: ExtractKind, options: DetectionOptions = {}): DetectedLayout {
  const { knownColumns = mappableColumns(kind), weekStart, given = {} } = options;
  const { encoding, text, linesAbove, separator, records } = readTable(head, given);
  const header = given.hasHeader === undefined ? detectHeader(records, knownNames(knownColumns)) : set(given.hasHeader);
  const theirColumns = namesOf(records, header.value);
  const profiles = profileColumns(header.value ? records.slice(1) : records, theirColumns);
  const numbers = given.decimal !== undefined && given.thousands !== undefined
    ? set({ decimal: given.decimal, thousands: given.thousands }) : detectNumbers(profiles, separator.value);
  const order = given.dateOrder ? set(given.dateOrder) : detectDateOrder(profiles, weekStart);
  const proposals = propose({ profiles, columns: knownColumns, format: numbers.value, hasHeader: header.value });
  const positionOf = (column: string) => proposals.find((proposal) => proposal.column === column)?.position;
  const weekDay = detectWeekDay(profiles.find(({ position }) => position === positionOf("week")), { order: order.value, weekStart });
  const tax = detectTax(theirColumns[positionOf("net_sales") ?? -1] ?? "");
  const parts = [encoding, linesAbove, separator, header, numbers, order, weekDay, tax];
  return {
    layout: {
      kind, encoding: encoding.value, separator: separator.value, linesAbove: linesAbove.value, hasHeader: header.value, theirColumns, ...numbers.value,
      dateOrder: order.value, weekDay: weekDay.value, mapping: mappingOf(proposals, theirColumns), words: structuredClone(defaultWords),
      missingMeans: "unknown", tax: tax.value,
    },
    confidence: {
      encoding: encoding.confidence, separator: separator.confidence, header: header.confidence, numbers: numbers.confidence,
      dates: order.confidence, weekDay: weekDay.confidence, mapping: mappingConfidence(kind, proposals),
    },
    columns: profiles.map((profile) => describe(profile, proposals)),
    warnings: [
      ...(text.separatorLine ? [separatorLineWarning] : []),
      ...titleWarnings(records, header.value),
      ...parts.flatMap(({ warnings }) => warnings),
      ...mappingWarnings({ kind, profiles, proposals, columns: knownColumns }),
    ],
  };
}

const separatorLineWarning: LayoutWarning = {
  code: "separator-line", message: "The first line only names the separator; the columns are taken from the line below it.",
};

type Table = {
  encoding: Detected<Encoding>; text: HeadText; linesAbove: Detected<number>; separator: Detected<Separator>; records: string[][];
};

function readTable(head: Uint8Array, given: NonNullable<DetectionOptions["given"]>): Table {
  const encoding = given.encoding ? set(given.encoding) : detectEncoding(head);
  const whole = readHead(head, encoding.value) ?? { text: "", isCut: false, separatorLine: null };
  const separator = given.separator ? set(given.separator) : detectSeparator(whole.text, whole);
  const linesAbove = given.linesAbove === undefined ? detectLinesAbove(whole.text, { ...whole, separator: separator.value }) : set(given.linesAbove);
  const text = { ...whole, text: withoutLines(whole.text, linesAbove.value) };
  // What stands above is no reason to warn of ragged rows.
  const again = given.separator || linesAbove.value === 0 ? separator : detectSeparator(text.text, text);
  return { encoding, text, linesAbove, separator: again, records: recordsOf(text, again.value) };
}

/** Without a header each column has an empty name. */
function namesOf(records: readonly string[][], hasHeader: boolean): string[] {
  const [first = []] = records;
  const width = commonest(records.map(({ length }) => length));
  const names = hasHeader ? namesIn(first) : Array.from({ length: width }, () => "");
  return names.length > 0 ? names.slice(0, mostColumns) : [""];
}

/** A title above the header is taken for it, and then has fewer fields than most rows have values. */
function titleWarnings([first = [], ...below]: readonly string[][], hasHeader: boolean): LayoutWarning[] {
  const isWider = (row: readonly string[]) => row.slice(first.length).some((value) => value.trim() !== "");
  if (!hasHeader || below.length === 0 || shareOf(below, isWider) < most) return [];
  const message = `The first line has ${first.length === 1 ? "1 field" : `${first.length} fields`}, the lines below have more. Remove what stands above the columns' names.`;
  return [{ code: "lines-above-header", message }];
}

type Proposing = { profiles: readonly ColumnProfile[]; columns: readonly string[]; format: { decimal: "." | ","; thousands: Layout["thousands"] }; hasHeader: boolean };

function propose({ profiles, columns, format, hasHeader }: Proposing): Proposal[] {
  const named = hasHeader ? proposeByName(profiles, { columns, words: wordReader(defaultWords) }) : [];
  return [...named, ...proposeByValues({ profiles, columns, format, hasHeader, named })];
}

/** By name where it is one name of one column. */
function mappingOf(proposals: readonly Proposal[], theirColumns: readonly string[]): Record<string, ColumnSource> {
  const source = (position: number): ColumnSource => {
    const name = theirColumns[position] ?? "";
    const isUnique = name !== "" && theirColumns.filter((other) => other === name).length === 1;
    return isUnique ? { from: "name", name } : { from: "position", position };
  };
  return Object.fromEntries([...proposals].sort((one, other) => one.position - other.position).map(({ column, position }) => [column, source(position)]));
}

function mappingConfidence(kind: ExtractKind, proposals: readonly Proposal[]): number {
  const needed = extractColumns[kind].filter((column) => column.needed);
  const scores = needed.map(({ name }) => proposals.find(({ column }) => column === name)?.score ?? 0);
  return Math.round((scores.reduce((sum, score) => sum + score, 0) / needed.length) * 100) / 100;
}

function describe({ name, position, values }: ColumnProfile, proposals: readonly Proposal[]): DetectedColumn {
  const proposal = proposals.find((one) => one.position === position);
  const samples = [...new Set(values)].slice(0, mostSamples).map((value) => value.slice(0, longestName));
  if (!proposal) return { theirName: name, position, samples, proposed: null, why: "Neither its name nor its values say what it is" };
  return { theirName: name, position, samples, proposed: proposal.column, why: proposal.why, confidence: Math.min(1, proposal.score) };
}
