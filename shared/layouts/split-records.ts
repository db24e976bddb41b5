import type { Separator } from "../contract/layouts";

export type SplitOptions = {
  separator: Separator;
  /** Whether the text may end in the middle of a record, which is then left out. */
  isCut?: boolean;
  most?: number;
};

/** More lines than a quoted value has: the quote was left open. */
const mostLinesOfRecord = 40;

/**
 * Records of a CSV text (RFC 4180, any of our separators; line ends \n, \r\n or \r). Empty lines are passed over. A record
 * whose quotes do not close costs its first line only, which is then split without regard to quotes.
 *
 * @example splitRecords('a;"b;c"\n1;2', { separator: ";" }) // [["a", "b;c"], ["1", "2"]]
 */
export function splitRecords(text: string, { separator, isCut = false, most = Infinity }: SplitOptions): string[][] {
  const plain = text.replaceAll("\r\n", "\n").replaceAll("\r", "\n");
  const records: string[][] = [];
  let at = 0;
  while (at < plain.length && records.length < most) {
    const record = takeRecord(plain, at, separator) ?? takeLine(plain, at, separator);
    const reachesEnd = record.end >= plain.length && plain[plain.length - 1] !== "\n";
    at = record.end;
    if (isCut && reachesEnd && records.length > 0) break;
    if (record.fields.length > 1 || record.fields[0]?.trim() !== "") records.push(record.fields);
  }
  return records;
}

type Taken = { fields: string[]; end: number };

/** Null where a quote does not close. */
function takeRecord(text: string, start: number, separator: Separator): Taken | null {
  const fields: string[] = [];
  let [at, lines] = [start, 1];
  for (;;) {
    const field = text[at] === '"' ? takeQuoted(text, at, separator) : takePlain(text, at, separator);
    if (!field) return null;
    lines += field.value.split("\n", mostLinesOfRecord + 1).length - 1;
    if (lines > mostLinesOfRecord) return null;
    fields.push(field.value);
    if (text[field.end] !== separator) return { fields, end: field.end + 1 };
    at = field.end + 1;
  }
}

function takeLine(text: string, start: number, separator: Separator): Taken {
  const end = text.indexOf("\n", start);
  const line = text.slice(start, end === -1 ? text.length : end);
  return { fields: line.split(separator), end: end === -1 ? text.length : end + 1 };
}

type Field = { value: string; end: number };

function takePlain(text: string, start: number, separator: Separator): Field {
  let end = start;
  while (end < text.length && text[end] !== separator && text[end] !== "\n") end++;
  return { value: text.slice(start, end), end };
}

function takeQuoted(text: string, start: number, separator: Separator): Field | null {
  let value = "";
  let at = start + 1;
  for (;;) {
    const quote = text.indexOf('"', at);
    if (quote === -1) return null;
    value += text.slice(at, quote);
    if (text[quote + 1] !== '"') {
      const next = text[quote + 1];
      return next === undefined || next === separator || next === "\n" ? { value, end: quote + 1 } : null;
    }
    value += '"';
    at = quote + 2;
  }
}
