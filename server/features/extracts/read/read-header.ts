import { extractColumns } from "@shared/contract/extract-columns";
import { extractKindSchema, type ExtractKind } from "@shared/contract/extract-kinds";
import { UnreadableFile } from "./unreadable-file";

/** Where each column of ours stands in a file. */
export type Header = {
  positions: ReadonlyMap<string, number>;
  width: number;
  /** Names that are not ours; "(no name)" where there is none. */
  unknown: string[];
};

const separators: Record<string, string> = { ";": "semicolons", "\t": "tabs", "|": "bars" };

/**
 * Finds our columns by their names, in any order and case.
 *
 * @throws UnreadableFile where a needed column is missing or one of ours stands twice; the sentence names the columns.
 */
export function readHeader(kind: ExtractKind, fields: readonly string[]): Header {
  const names = fields.map((field) => field.trim().toLowerCase());
  const ours = new Set(extractColumns[kind].map(({ name }) => name));
  const repeated = [...new Set(names.filter((name, at) => ours.has(name) && names.indexOf(name) !== at))];
  if (repeated.length > 0) {
    throw new UnreadableFile("repeated-column", `The header has ${listOf(repeated)} more than once. Leave each column in once.`);
  }
  const missing = extractColumns[kind].filter(({ name, needed }) => needed && !names.includes(name)).map(({ name }) => name);
  if (missing.length > 0) throw missingColumns({ kind, names, missing });
  return {
    positions: new Map(names.map((name, at) => [name, at] as const).filter(([name]) => ours.has(name))),
    width: names.length,
    unknown: names.filter((name) => !ours.has(name)).map((name) => name || "(no name)"),
  };
}

function missingColumns({ kind, names, missing }: { kind: ExtractKind; names: string[]; missing: string[] }): UnreadableFile {
  const separator = names.length === 1 ? Object.keys(separators).find((candidate) => names[0]?.includes(candidate)) : undefined;
  if (separator) {
    const detail = `The file is separated by ${separators[separator]}, not by commas. Save it with commas between the columns.`;
    return new UnreadableFile("not-comma-separated", detail);
  }
  const other = extractKindSchema.options.find((option) => option !== kind && hasAll(option, names));
  const hint = other ? `It looks like a file of ${other}: upload it as that.` : hintFromFirstLine(kind, names);
  const columns = missing.length === 1 ? "the column" : "the columns";
  return new UnreadableFile("missing-columns", `The header of a ${kind} file needs ${columns} ${listOf(missing)}, which this one lacks. ${hint}`);
}

function hintFromFirstLine(kind: ExtractKind, names: readonly string[]): string {
  const first = `The first line has: ${listOf(names.slice(0, 30)).slice(0, 300)}.`;
  const hasNone = extractColumns[kind].every(({ name }) => !names.includes(name));
  return hasNone ? `${first} If that is a row already, put a line with the columns' names above it.` : first;
}

const hasAll = (kind: ExtractKind, names: string[]) =>
  extractColumns[kind].every(({ name, needed }) => !needed || names.includes(name));

function listOf(names: readonly string[]): string {
  if (names.length < 2) return names.join("");
  return `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;
}
