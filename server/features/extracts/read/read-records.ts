import Papa from "papaparse";

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

/**
 * Records of a CSV text (RFC 4180, comma), a batch for each piece of text. Empty lines are passed over but counted, and
 * line ends inside quotes count as lines of the file. A stray quote costs its own line only: where a record runs over
 * several lines and does not have as many fields as the header, its first line is given up and reading goes on with the next one.
 */
export async function* readRecords(pieces: AsyncIterable<string>): AsyncGenerator<CsvRecord[]> {
  const reader = new RecordReader();
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

  read(piece: string): CsvRecord[] {
    this.#text += this.#isSkipping ? this.#afterSkippedLine(piece) : piece;
    const records = this.#take();
    while (this.#text.length > longestRecord) records.push(...this.#giveUpLine(), ...this.#take());
    return records;
  }

  /** What is left when the file has ended, with or without a last line end. */
  end(): CsvRecord[] {
    if (this.#text !== "") this.#text += "\n";
    const records = this.#take();
    while (this.#text !== "") records.push(...this.#giveUpLine(), ...this.#take());
    return records;
  }

  /** Takes every complete record off the front of the text. */
  #take(): CsvRecord[] {
    const records: CsvRecord[] = [];
    let isDone = this.#takePlain(records);
    while (!isDone) {
      isDone = this.#takeUntilDoubt(records);
      if (!isDone) records.push(...this.#giveUpLine());
    }
    return records;
  }

  /** Most files have no quotes, and then every line is a record: they are taken at once. False where there are some. */
  #takePlain(records: CsvRecord[]): boolean {
    if (this.#text.includes('"')) return false;
    const end = this.#text.lastIndexOf("\n");
    if (end === -1) return true;
    const lines = this.#text.slice(0, end);
    // Of an empty text the package makes no record, of an empty line one.
    const rows = lines === "" ? [[""]] : Papa.parse<string[]>(lines, { delimiter: ",", newline: "\n" }).data;
    for (const fields of rows) this.#add(fields, 1, records);
    this.#text = this.#text.slice(end + 1);
    return true;
  }

  #add(fields: string[], lines: number, records: CsvRecord[]): void {
    const isEmpty = fields.length === 1 && fields[0] === "";
    if (!isEmpty) {
      this.#width ??= fields.length;
      records.push({ line: this.#line, fields });
    }
    this.#line += lines;
  }

  /** False where it stopped before a record that cannot be right. */
  #takeUntilDoubt(records: CsvRecord[]): boolean {
    // The package drops a byte order mark at the start of any text, and its positions would be one off.
    const text = this.#text.replace(/^\ufeff+/, "");
    let [start, isSure] = [0, true];
    Papa.parse<string[]>(text, {
      delimiter: ",",
      newline: "\n",
      step: ({ data: fields, errors, meta: { cursor: end } }, parser) => {
        const isComplete = end > start && text.charCodeAt(end - 1) === 10 && !errors.some(({ code }) => code === "MissingQuotes");
        if (!isComplete) {
          parser.abort();
          return;
        }
        const lines = countLines(text, start, end);
        isSure = errors.length === 0 && (lines === 1 || this.#width === undefined || fields.length === this.#width);
        if (!isSure) {
          parser.abort();
          return;
        }
        this.#add(fields, lines, records);
        start = end;
      },
    });
    this.#text = text.slice(start);
    return isSure;
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
