import { isUtf8 } from "node:buffer";
import type { Encoding } from "@shared/contract/layouts";
import { decodeWindows1252 } from "@shared/layouts";
import { UnreadableFile } from "./unreadable-file";

/** How text is made of the bytes of one encoding, a piece at a time. */
export type Codec = {
  /** How many bytes at the end are the beginning of a character that goes on in the next piece. */
  unfinishedBytes: (bytes: Buffer) => number;
  /** The text of whole characters, which begin in this line of the file. @throws UnreadableFile naming the line. */
  decode: (bytes: Buffer, line: number) => string;
  /** What is wrong where a file ends within a character. */
  endsWithin: (line: number) => UnreadableFile;
};

const utf8: Codec = {
  unfinishedBytes: unfinishedUtf8,
  decode(bytes, line) {
    if (isUtf8(bytes)) return bytes.toString("utf8");
    throw notUtf8(line + linesBefore(bytes));
  },
  endsWithin: notUtf8,
};

const utf16 = (decode: Codec["decode"]): Codec => ({
  unfinishedBytes: (bytes) => bytes.length % 2,
  decode,
  endsWithin: (line) => new UnreadableFile("not-utf-16", `The file ends within a character in line ${line}, or is not UTF-16. Export it again.`),
});

const c1 = /[\u0080-\u009f]/;

/** How to read each encoding. */
export const codecs: Record<Encoding, Codec> = {
  "utf-8": utf8,
  "utf-16le": utf16((bytes) => bytes.toString("utf16le")),
  // Turned on a copy: the bytes may be looked at again.
  "utf-16be": utf16((bytes) => Buffer.from(bytes).swap16().toString("utf16le")),
  "windows-1252": {
    unfinishedBytes: () => 0,
    decode(bytes) {
      const text = bytes.toString("latin1");
      return c1.test(text) ? decodeWindows1252(bytes) : text;
    },
    endsWithin: notUtf8,
  },
};

function notUtf8(line: number): UnreadableFile {
  const detail = `The file is not UTF-8: line ${line} holds bytes that are no character. Set its encoding under "How it is read", or save it as CSV UTF-8 and upload that.`;
  return new UnreadableFile("not-utf-8", detail);
}

/** Line ends before the first byte that is not UTF-8, by halving. */
function linesBefore(bytes: Buffer): number {
  let [valid, invalid] = [0, bytes.length];
  while (invalid - valid > 1) {
    const middle = (valid + invalid) >> 1;
    const part = bytes.subarray(0, middle);
    if (isUtf8(part.subarray(0, middle - unfinishedUtf8(part)))) valid = middle;
    else invalid = middle;
  }
  return bytes.subarray(0, valid).toString("latin1").replaceAll("\r\n", "\n").split("\n").length - 1;
}

/** How many bytes at the end are the beginning of a character that goes on in the next piece (RFC 3629, section 3). */
function unfinishedUtf8(bytes: Buffer): number {
  for (let back = 1; back <= Math.min(3, bytes.length); back++) {
    const byte = bytes[bytes.length - back] ?? 0;
    const isContinuation = (byte & 0xc0) === 0x80;
    if (isContinuation) continue;
    const length = byte >= 0xf0 ? 4 : byte >= 0xe0 ? 3 : byte >= 0xc0 ? 2 : 1;
    return length > back ? back : 0;
  }
  return 0;
}
