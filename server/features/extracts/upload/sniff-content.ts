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

/** Whether these first bytes are the byte order mark of UTF-16, in either order. */
export function isUtf16(head: Buffer): boolean {
  return head.length >= 2 && ((head[0] === 0xff && head[1] === 0xfe) || (head[0] === 0xfe && head[1] === 0xff));
}

/**
 * What a file is, told from its first bytes, when it can be no CSV text.
 *
 * @returns words that go after "This is", or undefined where it may be text (gzip and UTF-16 are left to the check).
 * @example whatInsteadOfText(Buffer.from("%PDF-1.7")) // "a PDF document"
 */
export function whatInsteadOfText(head: Buffer): string | undefined {
  const known = signatures.find(({ begins }) => head.subarray(0, begins.length).equals(begins));
  if (known) return known.what;
  if (isGzip(head) || isUtf16(head)) return undefined;
  if (head.includes(0)) return "a binary file";
  const controls = head.filter((byte) => byte < 0x09 || (byte > 0x0d && byte < 0x20)).length;
  return controls > head.length / 50 ? "a binary file" : undefined;
}
