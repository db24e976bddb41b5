import { detectEncoding } from "@shared/layouts";

/** Files that are taken for CSV by mistake, by how they begin (each format's own description). */
const signatures: { what: string; begins: Buffer }[] = [
  { what: "a spreadsheet workbook or a zip archive", begins: Buffer.from("PK\x03\x04", "latin1") },
  { what: "an old spreadsheet or office document", begins: Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]) },
  { what: "a PDF document", begins: Buffer.from("%PDF-", "latin1") },
  { what: "a picture (PNG)", begins: Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]) },
  { what: "a picture (JPEG)", begins: Buffer.from([0xff, 0xd8, 0xff]) },
  { what: "a picture (GIF)", begins: Buffer.from("GIF8", "latin1") },
  { what: "an archive (7z)", begins: Buffer.from([0x37, 0x7a, 0xbc, 0xaf, 0x27, 0x1c]) },
  { what: "a file compressed by bzip2", begins: Buffer.from("BZh", "latin1") },
  { what: "a file compressed by xz", begins: Buffer.from([0xfd, 0x37, 0x7a, 0x58, 0x5a, 0x00]) },
  { what: "a file compressed by zstd", begins: Buffer.from([0x28, 0xb5, 0x2f, 0xfd]) },
];

const gzipSignature = Buffer.from([0x1f, 0x8b]);

/** Bytes that are enough to tell text from anything else. */
export const sniffedBytes = 4096;

/** Whether these first bytes are those of a gzip file (RFC 1952, 2.3.1). */
export function isGzip(head: Buffer): boolean {
  return head.subarray(0, gzipSignature.length).equals(gzipSignature);
}

const byteOrderMarks = { "utf-16le": Buffer.from([0xff, 0xfe]), "utf-16be": Buffer.from([0xfe, 0xff]) };

/** The order of the bytes where these can be the first of a UTF-16 text, by its mark or by where its NUL bytes stand. */
function utf16Of(head: Buffer): keyof typeof byteOrderMarks | undefined {
  if (head.subarray(0, 2).equals(byteOrderMarks["utf-16le"])) return "utf-16le";
  if (head.subarray(0, 2).equals(byteOrderMarks["utf-16be"])) return "utf-16be";
  const encoding = detectEncoding(head).value;
  return encoding === "utf-16le" || encoding === "utf-16be" ? encoding : undefined;
}

/**
 * What a file is, told from its first bytes, when it can be no CSV text.
 *
 * @returns words that go after "This is", or undefined where it may be text (gzip is left to the check).
 * @example whatInsteadOfText(Buffer.from("%PDF-1.7")) // "a PDF document"
 */
export function whatInsteadOfText(head: Buffer): string | undefined {
  const known = signatures.find(({ begins }) => head.subarray(0, begins.length).equals(begins));
  if (known) return known.what;
  if (isGzip(head)) return undefined;
  const utf16 = utf16Of(head);
  const codes = utf16 ? utf16Codes(head, utf16) : head;
  if (codes.includes(0)) return "a binary file";
  const controls = codes.filter((code) => code < 0x09 || (code > 0x0d && code < 0x20)).length;
  return controls > codes.length / 50 ? "a binary file" : undefined;
}

function utf16Codes(head: Buffer, encoding: keyof typeof byteOrderMarks): Uint16Array {
  const view = new DataView(head.buffer, head.byteOffset, head.length - (head.length % 2));
  return Uint16Array.from({ length: view.byteLength / 2 }, (_, at) => view.getUint16(2 * at, encoding === "utf-16le"));
}
