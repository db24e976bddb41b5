import type { Encoding } from "@shared/contract/layouts";
import { isGzip, sniffedBytes, whatInsteadOfText } from "../upload/sniff-content";
import { codecs } from "./codecs";
import { UnreadableFile } from "./unreadable-file";

const byteOrderMark = "\ufeff";

/**
 * Text from the bytes of a file, piece by piece, without its byte order mark and with every line end as "\n".
 *
 * @throws UnreadableFile where it is binary, or holds bytes that are none of the encoding; that one names the line.
 */
export async function* decodeText(bytes: AsyncIterable<Buffer>, encoding: Encoding = "utf-8"): AsyncGenerator<string> {
  const { unfinishedBytes, decode, endsWithin } = codecs[encoding];
  const lineEnds = new LineEnds();
  let pending: Buffer = Buffer.alloc(0);
  let line = 1;
  let isFirst = true;
  for await (const chunk of bytes) {
    const joined = pending.length > 0 ? Buffer.concat([pending, chunk]) : chunk;
    if (isFirst) requireText(joined);
    const complete = joined.subarray(0, joined.length - unfinishedBytes(joined));
    pending = joined.subarray(complete.length);
    const text = lineEnds.unify(decode(complete, line));
    line += count(text, "\n");
    yield isFirst && text.startsWith(byteOrderMark) ? text.slice(1) : text;
    isFirst &&= complete.length === 0;
  }
  if (pending.length > 0) throw endsWithin(line);
  yield lineEnds.rest();
}

/** @throws UnreadableFile where a file that begins like this can be no text. */
export function requireText(head: Buffer): void {
  const first = head.subarray(0, sniffedBytes);
  const what = isGzip(first) ? "another compressed file" : whatInsteadOfText(first);
  if (what) throw new UnreadableFile("not-a-csv-file", `The file holds ${what}, no CSV text. Export it as CSV (comma separated, UTF-8).`);
}

function count(text: string, character: string): number {
  let found = 0;
  for (let at = text.indexOf(character); at !== -1; at = text.indexOf(character, at + 1)) found++;
  return found;
}

/** Turns "\r\n" and a lone "\r" into "\n", also where the pair is cut by two pieces. */
class LineEnds {
  #held = "";

  unify(text: string): string {
    let whole = this.#held + text;
    this.#held = whole.endsWith("\r") ? "\r" : "";
    if (this.#held) whole = whole.slice(0, -1);
    return whole.includes("\r") ? whole.replaceAll("\r\n", "\n").replaceAll("\r", "\n") : whole;
  }

  rest(): string {
    return this.#held ? "\n" : "";
  }
}
