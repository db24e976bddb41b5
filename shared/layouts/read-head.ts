import type { Encoding, Separator } from "../contract/layouts";
import { decodeHead } from "./detect-encoding";
import { headBytes } from "./detected";
import { splitRecords } from "./split-records";

/** A head as text, and whether the file goes on behind it. */
export type HeadText = { text: string; isCut: boolean; /** The first line where it is no record but names the separator, as spreadsheets understand. */ separatorLine: string | null };

/**
 * The text of a file's head in an encoding; null where the bytes are none of it. A line "sep=;" above the records is taken off,
 * and so are as many lines above the columns' names as the layout passes over.
 */
export function readHead(head: Uint8Array, encoding: Encoding, linesAbove = 0): HeadText | null {
  const text = decodeHead(head, encoding);
  if (text === null) return null;
  const separatorLine = /^"?sep=.?"?(?:\r\n|\n|\r|$)/i.exec(text)?.[0] ?? null;
  const records = separatorLine ? text.slice(separatorLine.length) : text;
  return { text: withoutLines(records, linesAbove), isCut: head.length >= headBytes, separatorLine };
}

/** A text without its first lines. */
export function withoutLines(text: string, lines: number): string {
  let rest = text;
  for (let passed = 0; passed < lines; passed++) rest = rest.replace(/^[^\r\n]*(?:\r\n|\n|\r|$)/, "");
  return rest;
}

/** Rows beyond these tell nothing new. */
const mostRecords = 1_000;

export const recordsOf = ({ text, isCut }: HeadText, separator: Separator): string[][] =>
  splitRecords(text, { separator, isCut, most: mostRecords });
