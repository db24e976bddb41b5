import { formatBytes } from "@/lib/format/bytes";

/** How much of a file's beginning tells what it is. */
export const sniffedBytes = 64 * 1024;

type Beginning = { size: number; head: Uint8Array };

const beginsWith = ({ head }: Beginning, bytes: readonly number[]) => bytes.every((byte, at) => head[at] === byte);
const isGzip = (file: Beginning) => beginsWith(file, [0x1f, 0x8b]);
const isUtf16 = (file: Beginning) => beginsWith(file, [0xff, 0xfe]) || beginsWith(file, [0xfe, 0xff]);

/** Text of UTF-16 without its mark has a zero in every second place; in other text none is found. */
const hasStrayZeros = ({ head }: Beginning): boolean => {
  const zeros = [0, 0];
  head.forEach((byte, at) => {
    if (byte === 0) zeros[at % 2] += 1;
  });
  const [most, least] = [Math.max(...zeros), Math.min(...zeros)];
  return most > 0 && !(most > head.length / 4 && least === 0);
};

/** Why a file is not worth sending, said before it is sent; null where nothing speaks against it. */
export const fileProblem = (file: Beginning, limitBytes: number | undefined): string | null => {
  if (file.size === 0) return "The file is empty. Export it again.";
  if (limitBytes !== undefined && file.size > limitBytes) {
    return `It has ${formatBytes(file.size)}; at most ${formatBytes(limitBytes)} are taken. Split it by weeks, or compress it as .csv.gz.`;
  }
  if (isGzip(file)) return null;
  if (beginsWith(file, [0x50, 0x4b, 0x03, 0x04])) return "It is a spreadsheet's workbook or an archive. Save the sheet as CSV and take that file.";
  if (beginsWith(file, [0x25, 0x50, 0x44, 0x46])) return "It is a PDF. Export the rows as CSV.";
  if (!isUtf16(file) && hasStrayZeros(file)) return "It is not text, so no rows can be read from it. Export it as CSV.";
  return null;
};
