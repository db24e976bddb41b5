import Papa from "papaparse";
import type { Separator } from "@shared/contract/layouts";
import { splitQuotedLine } from "./split-quoted-line";

/** One record of a CSV file. */
export type CsvRecord = {
  /** Line of the file on which it begins, from 1. */
  line: number;
  /** Undefined where quotes leave open where its fields end; only this line is lost then. */
  fields: string[] | undefined;
  /** Beginning of the text of a record without fields. */
  text?: string;
};

/** Longer than any record can be: beyond it a quote was left open. */
const longestRecord = 1024 ** 2;
const shownCharacters = 200;

/** A first line by which spreadsheets are told the separator; it is no record. */
const separatorLine = /^"?sep=.?"?$/i;
const longestSeparatorLine = 16;

export type RecordFormat = {
  separator?: Separator;
  /** Lines to pass over before the first record. */
  linesAbove?: number;
};

/**
 * Records of a CSV text (RFC 4180, with any of our separators), a batch for each piece of text. Empty lines are passed over
 * but counted, as is a first line that names the separator, and line ends inside quotes count as lines of the file. A stray
 * quote costs its own line only: where a record runs over several lines and does not have as many fields as the first one, its
 * first line is given up and reading goes on with the next one.
 */
export async function* readRecords(pieces: AsyncIterable<string>, format: RecordFormat = {}): AsyncGenerator<CsvRecord[]> {
  const reader = new RecordReader(format);
  for await (const piece of pieces) {
    const records = reader.read(piece);
    if (records.length > 0) yield records;
  }
  const records = reader.end();
  if (records.length > 0) yield records;
}

class RecordReader {
  #text = "";
  #line = 1;
  #width: number | undefined;
  /** Inside a line of which more than `longestRecord` was dropped. */
  #isSkipping = false;
  /** Lines still to be passed over. */
  #above: number;
  #mayNameSeparator = true;
  readonly #separator: Separator;

  constructor({ separator = ",", linesAbove = 0 }: RecordFormat) {
    this.#separator = separator;
    this.#above = linesAbove;
  }

  read(piece: string): CsvRecord[] {
    this.#text += this.#isSkipping ? this.#afterSkippedLine(piece) : piece;
    if (!this.#isAtRecords()) return [];
    const records = this.#take();
    while (this.#text.length > longestRecord) records.push(...this.#giveUpLine(), ...this.#take());
    return records;
  }

  /** What is left when the file has ended, with or without a last line end. */
  end(): CsvRecord[] {
    if (this.#text !== "") this.#text += "\n";
    if (!this.#isAtRecords()) return [];
    const records = this.#take();
    while (this.#text !== "") records.push(...this.#giveUpLine(), ...this.#take());
    return records;
  }

  /** Passes over what stands above the records; false where it does not end yet. */
  #isAtRecords(): boolean {
    if (this.#mayNameSeparator) {
      const end = this.#text.indexOf("\n");
      if (end === -1 && this.#text.length <= longestSeparatorLine) return false;
      this.#mayNameSeparator = false;
      if (end !== -1 && separatorLine.test(this.#text.slice(0, end))) this.#passOver(end);
    }
    for (; this.#above > 0; this.#above--) {
      const end = this.#text.indexOf("\n");
      if (end === -1) return false;
      this.#passOver(end);
    }
    return true;
  }

  #passOver(end: number): void {
    this.#text = this.#text.slice(end + 1);
    this.#line++;
  }

  /** Takes every complete record off the front of the text. */
  #take(): CsvRecord[] {
    const records: CsvRecord[] = [];
    while (!this.#takeLines(records)) {
      const outcome = this.#takeRecord(records);
      if (outcome === "open") break;
      if (outcome === "wrong") records.push(...this.#giveUpLine());
    }
    return records;
  }

  /** Takes the lines that are records by themselves, as nearly all are. False where one is left that may not be. */
  #takeLines(records: CsvRecord[]): boolean {
    const text = this.#text;
    const hasQuotes = text.includes('"');
    let start = 0;
    for (let end = text.indexOf("\n"); end !== -1; end = text.indexOf("\n", start)) {
      const line = text.slice(start, end);
      const fields = hasQuotes && line.includes('"') ? splitQuotedLine(line, this.#separator) : line.split(this.#separator);
      if (!fields) break;
      this.#add(fields, 1, records);
      start = end + 1;
    }
    this.#text = text.slice(start);
    return !this.#text.includes("\n");
  }

  #add(fields: string[], lines: number, records: CsvRecord[]): void {
    const isEmpty = fields.length === 1 && fields[0] === "";
    if (!isEmpty) {
      this.#width ??= fields.length;
      records.push({ line: this.#line, fields });
    }
    this.#line += lines;
  }

  /** Takes one record that runs over several lines; "open" where its end is still to come, "wrong" where it cannot be right. */
  #takeRecord(records: CsvRecord[]): "taken" | "open" | "wrong" {
    // The package drops a byte order mark at the start of any text, and its positions would be one off.
    const text = this.#text.replace(/^\ufeff+/, "");
    let outcome: "taken" | "open" | "wrong" = "open";
    Papa.parse<string[]>(text, {
      delimiter: this.#separator,
      newline: "\n",
      step: ({ data: fields, errors, meta: { cursor: end } }, parser) => {
        parser.abort();
        const isComplete = end > 0 && text.charCodeAt(end - 1) === 10 && !errors.some(({ code }) => code === "MissingQuotes");
        if (!isComplete) return;
        const lines = countLines(text, 0, end);
        const isSure = errors.length === 0 && (lines === 1 || this.#width === undefined || fields.length === this.#width);
        outcome = isSure ? "taken" : "wrong";
        if (!isSure) return;
        this.#add(fields, lines, records);
        this.#text = text.slice(end);
      },
    });
    return outcome;
  }

  #giveUpLine(): CsvRecord[] {
    const end = this.#text.indexOf("\n");
    const record = { line: this.#line, fields: undefined, text: this.#text.slice(0, end === -1 ? shownCharacters : Math.min(end, shownCharacters)) };
    this.#isSkipping = end === -1;
    this.#text = end === -1 ? "" : this.#text.slice(end + 1);
    if (end !== -1) this.#line++;
    return [record];
  }

  #afterSkippedLine(piece: string): string {
    const end = piece.indexOf("\n");
    if (end === -1) return "";
    this.#isSkipping = false;
    this.#line++;
    return piece.slice(end + 1);
  }
}

function countLines(text: string, start: number, end: number): number {
  let lines = 0;
  for (let at = text.indexOf("\n", start); at !== -1 && at < end; at = text.indexOf("\n", at + 1)) lines++;
  return lines;
}
