import { extractKindSchema, type ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout } from "@shared/contract/layouts";
import { detectLayout, missingColumns, ownLayout } from "@shared/layouts";
import { UnreadableFile } from "../read/unreadable-file";

/** Warnings that say why columns are missing. */
const explaining = new Set(["weeks-across", "values-do-not-fit", "no-separator", "serial-days"]);

/**
 * What a file is answered by that has columns for only some of ours: which are missing, and what to do.
 *
 * @returns null where every needed column is mapped.
 */
export function layoutNeeded(head: Uint8Array, layout: Layout): UnreadableFile | null {
  const missing = missingColumns(layout);
  if (missing.length === 0) return null;
  const { kind, theirColumns, hasHeader } = layout;
  const other = extractKindSchema.options.find((option) => option !== kind && ownLayout(option, theirColumns) !== null);
  const sentences = [
    `No column of the file is taken for ${listOf(missing)}, which a ${kind} file needs.`,
    other ? `It looks like a file of ${other}: upload it as that.` : columnsOf(theirColumns, hasHeader),
    ...other ? [] : [reasons(head, kind), 'Say under "How it is read" which column holds what; the file need not be uploaded again.'],
  ];
  return new UnreadableFile("layout-needed", sentences.filter((sentence) => sentence !== "").join(" "));
}

function columnsOf(theirColumns: readonly string[], hasHeader: boolean): string {
  if (!hasHeader) return `Its first line seems to be a row: it has ${theirColumns.length} columns without names.`;
  return `It has: ${listOf(theirColumns.slice(0, 30).map((name) => name || "(no name)")).slice(0, 300)}.`;
}

function reasons(head: Uint8Array, kind: ExtractKind): string {
  return detectLayout(head, kind).warnings.filter(({ code }) => explaining.has(code)).map(({ message }) => message).slice(0, 2).join(" ");
}

/**
 * Names as a sentence lists them.
 *
 * @example listOf(["units", "week", "store"]) // "units, week and store"
 */
export function listOf(names: readonly string[]): string {
  if (names.length < 2) return names.join("");
  return `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;
}
