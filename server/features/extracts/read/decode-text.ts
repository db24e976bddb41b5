import { isUtf8 } from "node:buffer";
import { isGzip, isUtf16, sniffedBytes, whatInsteadOfText } from "../upload/sniff-content";
import { UnreadableFile } from "./unreadable-file";

const byteOrderMark = "\ufeff";

/**
 * Text from the bytes of a UTF-8 file, piece by piece, without its byte order mark and with every line end as "\n".
 *
 * @throws UnreadableFile where it is UTF-16, binary, or holds bytes that are no UTF-8; that one names the line.
 */
export async function* decodeText(bytes: AsyncIterable<Buffer>): AsyncGenerator<string> {
  const lineEnds = new LineEnds();
  let pending: Buffer = Buffer.alloc(0);
  let line = 1;
  let isFirst = true;
  for await (const chunk of bytes) {
    const joined = pending.length > 0 ? Buffer.concat([pending, chunk]) : chunk;
    if (isFirst) requireText(joined.subarray(0, sniffedBytes));
    const complete = joined.subarray(0, joined.length - unfinishedBytes(joined));
    pending = joined.subarray(complete.length);
    const text = lineEnds.unify(decode(complete, line));
    line += count(text, "\n");
    yield isFirst && text.startsWith(byteOrderMark) ? text.slice(1) : text;
    isFirst &&= complete.length === 0;
  }
  if (pending.length > 0) throw notUtf8(line);
  yield lineEnds.rest();
}

function requireText(head: Buffer): void {
  if (isUtf16(head)) {
    throw new UnreadableFile("utf-16", "The file is encoded in UTF-16. Save it as CSV UTF-8 and upload that.");
  }
  const what = isGzip(head) ? "another compressed file" : whatInsteadOfText(head);
  if (what) throw new UnreadableFile("not-a-csv-file", `The file holds ${what}, no CSV text. Export it as CSV (comma separated, UTF-8).`);
}

function decode(complete: Buffer, firstLine: number): string {
  if (isUtf8(complete)) return complete.toString("utf8");
  throw notUtf8(firstLine + linesBefore(complete));
}

function notUtf8(line: number): UnreadableFile {
  const detail = `The file is not UTF-8: line ${line} holds bytes that are no character. Save it as CSV UTF-8 and upload that.`;
  return new UnreadableFile("not-utf-8", detail);
}

/** Line ends before the first byte that is not UTF-8, by halving. */
function linesBefore(bytes: Buffer): number {
  let [valid, invalid] = [0, bytes.length];
  while (invalid - valid > 1) {
    const middle = (valid + invalid) >> 1;
    const part = bytes.subarray(0, middle);
    if (isUtf8(part.subarray(0, middle - unfinishedBytes(part)))) valid = middle;
    else invalid = middle;
  }
  return count(bytes.subarray(0, valid).toString("latin1").replaceAll("\r\n", "\n"), "\n");
}

/** How many bytes at the end are the beginning of a character that goes on in the next chunk (RFC 3629, section 3). */
function unfinishedBytes(bytes: Buffer): number {
  for (let back = 1; back <= Math.min(3, bytes.length); back++) {
    const byte = bytes[bytes.length - back] ?? 0;
    const isContinuation = (byte & 0xc0) === 0x80;
    if (isContinuation) continue;
    const length = byte >= 0xf0 ? 4 : byte >= 0xe0 ? 3 : byte >= 0xc0 ? 2 : 1;
    return length > back ? back : 0;
  }
  return 0;
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
