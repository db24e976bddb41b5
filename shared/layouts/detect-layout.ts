import { extractColumns } from "../contract/extract-columns";
import type { ExtractKind } from "../contract/extract-kinds";
import { mappableColumns, type ColumnSource, type Layout } from "../contract/layouts";
import { most, profileColumns, type ColumnProfile } from "./column-profile";
import { defaultWords } from "./default-words";
import { detectDateOrder, detectWeekDay } from "./detect-days";
import { detectEncoding } from "./detect-encoding";
import { detectHeader } from "./detect-header";
import { detectNumbers } from "./detect-numbers";
import { commonest, detectSeparator } from "./detect-separator";
import { detectTax } from "./detect-tax";
import { shareOf, type LayoutWarning } from "./detected";
import { mappingWarnings } from "./mapping-warnings";
import { proposeByValues } from "./propose-by-values";
import { knownNames, proposeByName, type Proposal } from "./propose-mapping";
import { readHead, recordsOf } from "./read-head";
import { wordReader } from "./read-words";

/** One of the file's columns, and what it is taken for. */
export type DetectedColumn = { theirName: string; position: number; samples: string[]; proposed: string | null; why: string };

/** How sure each part of a detected layout is: 1 certain, 0.5 a guess, 0 nothing found. */
export type LayoutConfidence = Record<"encoding" | "separator" | "header" | "numbers" | "dates" | "weekDay" | "mapping", number>;

export type DetectedLayout = { layout: Layout; confidence: LayoutConfidence; columns: DetectedColumn[]; warnings: LayoutWarning[] };

const mostSamples = 5;
const longestName = 200;
const mostColumns = 500;

/**
 * Works out how a file is written and which of its columns are ours, from its first 64 KiB alone. The same head always gives
 * the same answer. What a file cannot tell stays at what is usual: a missing row is unknown, tax is included.
 *
 * @param head the file's first bytes, unpacked; 64 KiB or more mean that it goes on
 * @param knownColumns our columns that may be proposed
 * @example detectLayout(bytes, "sales").layout.separator // ";"
 */
export function detectLayout(head: Uint8Array, kind: ExtractKind, knownColumns: readonly string[] = mappableColumns(kind)): DetectedLayout {
  const encoding = detectEncoding(head);
  const text = readHead(head, encoding.value) ?? { text: "", isCut: false, separatorLine: null };
  const separator = detectSeparator(text.text, text);
  const records = recordsOf(text, separator.value);
  const header = detectHeader(records, knownNames(knownColumns));
  const theirColumns = namesOf(records, header.value);
  const profiles = profileColumns(header.value ? records.slice(1) : records, theirColumns);
  const numbers = detectNumbers(profiles, separator.value);
  const order = detectDateOrder(profiles);
  const proposals = propose({ profiles, columns: knownColumns, format: numbers.value, hasHeader: header.value });
  const positionOf = (column: string) => proposals.find((proposal) => proposal.column === column)?.position;
  const weekDay = detectWeekDay(profiles.find(({ position }) => position === positionOf("week")), order.value);
  const tax = detectTax(theirColumns[positionOf("net_sales") ?? -1] ?? "");
  const parts = [encoding, separator, header, numbers, order, weekDay, tax];
  return {
    layout: {
      kind, encoding: encoding.value, separator: separator.value, hasHeader: header.value, theirColumns, ...numbers.value,
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

/** Without a header each column has an empty name. */
function namesOf(records: readonly string[][], hasHeader: boolean): string[] {
  const [first = []] = records;
  const width = commonest(records.map(({ length }) => length));
  const names = hasHeader ? first.map((name) => name.trim().slice(0, longestName)) : Array.from({ length: width }, () => "");
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
  return { theirName: name, position, samples, proposed: proposal?.column ?? null, why: proposal?.why ?? "Neither its name nor its values say what it is" };
}
