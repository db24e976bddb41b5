import type { NastyFile } from "./nasty-files";
import { salesFile, salesHeader } from "./extracts";
import { good } from "./nasty-files";

const refused = (what: string, file: string | Buffer, code = "not-a-csv-file"): NastyFile => ({ what, file, refused: [422, code] });
const behind = (bytes: number[] | string, length = 2_000) => Buffer.concat([Buffer.from(bytes as string), Buffer.alloc(length, 0x5a)]);
const sales = salesFile(good("2026-06-01"), good("2026-06-08"));

/** Files that are known for what they are by their first bytes: nothing of them is kept. */
export const nastyRefused: NastyFile[] = [
  refused("no byte at all", "", "empty-file"),
  refused("a workbook called .csv", behind("PK\x03\x04")),
  refused("an old workbook", behind([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1])),
  refused("a PDF document", "%PDF-1.7\nweek,store"),
  refused("a PNG picture", behind([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])),
  refused("a JPEG picture", behind([0xff, 0xd8, 0xff, 0xe0])),
  refused("a GIF picture", behind("GIF89a")),
  refused("a 7z archive", behind([0x37, 0x7a, 0xbc, 0xaf, 0x27, 0x1c])),
  refused("a file that bzip2 compressed", behind("BZh91AY&SY")),
  refused("a file that xz compressed", behind([0xfd, 0x37, 0x7a, 0x58, 0x5a, 0x00])),
  refused("a file that zstd compressed", behind([0x28, 0xb5, 0x2f, 0xfd])),
  refused("a NUL byte in the header", `${salesHeader}\0\n${good("2026-06-01")}`),
  refused("NUL bytes alone", Buffer.alloc(5_000)),
  refused("control characters all over", "\x01\x02\x03\x04 sales \x05\x06"),
  refused("UTF-32 with the lower byte first", Buffer.concat([Buffer.from([0xff, 0xfe, 0, 0]), ...Array.from(sales, (letter) => Buffer.from([letter.charCodeAt(0), 0, 0, 0]))])),
  refused("UTF-32 with the higher byte first", Buffer.concat([Buffer.from([0, 0, 0xfe, 0xff]), ...Array.from(sales, (letter) => Buffer.from([0, 0, 0, letter.charCodeAt(0)]))])),
];
