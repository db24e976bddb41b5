import fc from "fast-check";
import Papa from "papaparse";
import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { encodingSchema, separatorSchema, type Encoding } from "@shared/contract/layouts";
import { decodeText } from "../../server/features/extracts/read/decode-text";
import { expandBytes } from "../../server/features/extracts/read/expand-bytes";
import { readRecords, type CsvRecord, type RecordFormat } from "../../server/features/extracts/read/read-records";
import { bytesIn } from "../layouts/bytes-in";

/** The bytes in pieces, cut where the numbers say. */
async function* inPieces(bytes: Buffer, cuts: number[]): AsyncGenerator<Buffer> {
  const places = [0, ...cuts.map((cut) => cut % (bytes.length + 1)).sort((a, b) => a - b), bytes.length];
  for (let at = 1; at < places.length; at++) yield bytes.subarray(places[at - 1], places[at]);
}

type Form = RecordFormat & { encoding?: Encoding };

async function recordsOf(bytes: Buffer, cuts: number[] = [], { encoding, ...format }: Form = {}): Promise<CsvRecord[]> {
  const records: CsvRecord[] = [];
  const expanded = expandBytes(inPieces(bytes, cuts), { onRead: () => undefined, limitBytes: 1e9 });
  for await (const batch of readRecords(decodeText(expanded, encoding), format)) records.push(...batch);
  return records;
}

const cuts = fc.array(fc.nat(), { maxLength: 8 });
const cell = fc.oneof(
  fc.constantFrom("", "1.5", "a,b", 'say "x"', "two\nlines", "\ufeffmark", "größe 🍎", "  blank  "),
  fc.string({ unit: "grapheme", maxLength: 6 }).map((text) => text.replaceAll("\r", "")),
);
const plainCell = fc.constantFrom("", "1.5", "2026-06-01", "größe 🍎", "x");
const tableOf = (anyCell: fc.Arbitrary<string>) => fc.array(fc.array(anyCell, { minLength: 3, maxLength: 3 }), { minLength: 1, maxLength: 12 });

describe("reading CSV", () => {
  it.each([["cells of any kind", tableOf(cell)], ["cells without quotes", tableOf(plainCell)]])(
    "gives every field and line number of %s back, however the bytes are cut and packed", async (_, tables) => {
      await fc.assert(fc.asyncProperty(tables, cuts, fc.constantFrom("\n", "\r\n"), fc.boolean(), fc.boolean(), async (table, places, lineEnd, isZipped, endsWithLine) => {
        const text = Papa.unparse(table, { newline: lineEnd }) + (endsWithLine ? lineEnd : "");
        const bytes = Buffer.from(text);
        let line = 1;
        const expected = table.map((fields) => {
          const record = { line, fields };
          line += 1 + fields.join("").split("\n").length - 1;
          return record;
        });
        expect(await recordsOf(isZipped ? gzipSync(bytes) : bytes, places)).toEqual(expected);
      }), { numRuns: 300 });
    });

  it("loses no line and invents none, whatever the text", async () => {
    const text = fc.string({ unit: fc.constantFrom('"', ",", "\n", "a", "\r", " "), maxLength: 60 });
    await fc.assert(fc.asyncProperty(text, cuts, async (anyText, places) => {
      const bytes = Buffer.from(anyText);
      const records = await recordsOf(bytes, places);
      expect(records).toEqual(await recordsOf(bytes));
      const lines = anyText.replace(/\r\n?/g, "\n").split("\n");
      const covered = new Set(records.flatMap(({ line, fields }) => Array.from({ length: fields ? fields.join("").split("\n").length : 1 }, (_, at) => line + at)));
      // A record of one empty cell, with quotes or without, is an empty line.
      lines.forEach((line, at) => expect(covered.has(at + 1) || /^["\s]*$/.test(line)).toBe(true));
      expect(Math.max(0, ...covered)).toBeLessThanOrEqual(lines.length);
    }), { numRuns: 1_000 });
  });

  it("counts empty lines", async () => {
    expect(await recordsOf(Buffer.from("\n\na,b\n\n1,2\n\n\n3,\"4\"\n"))).toEqual([
      { line: 3, fields: ["a", "b"] }, { line: 5, fields: ["1", "2"] }, { line: 8, fields: ["3", "4"] },
    ]);
  });

  it("names the line of the first byte that is no UTF-8", async () => {
    const bytes = Buffer.concat([Buffer.from("größe,🍎\r\n1,2\r\n3,"), Buffer.from([0xf0, 0x9f]), Buffer.from(",\r\n")]);
    for (const at of [1, 3, 12, 18, 21]) await expect(recordsOf(bytes, [at])).rejects.toThrow(/line 3 holds bytes/);
  });
});

describe("reading other forms", () => {
  const forms = fc.record({ encoding: fc.constantFrom(...encodingSchema.options), separator: fc.constantFrom(...separatorSchema.options), mark: fc.boolean(), linesAbove: fc.nat({ max: 3 }) });
  const cells = fc.oneof(fc.constantFrom("", "1,5", "a;b|c\td", 'say "x"', "two\nlines", "caf\u00e9 \u20ac"), fc.string({ unit: fc.constantFrom("a", "\u00fc", " ", "\u0160"), maxLength: 5 }));

  it("gives every field and line number back in every encoding and separator, however the bytes are cut", async () => {
    await fc.assert(fc.asyncProperty(tableOf(cells), cuts, forms, fc.boolean(), async (table, places, { encoding, separator, mark, linesAbove }, namesSeparator) => {
      const above = [...(namesSeparator ? [`sep=${separator}`] : []), ...Array.from({ length: linesAbove }, (_, at) => `Title "${at}`)];
      const text = [...above, Papa.unparse(table, { newline: "\n", delimiter: separator, quotes: (value: unknown) => /["\n,;|\t]/.test(String(value)) })].join("\n");
      const bytes = Buffer.from(bytesIn(encoding, text, { mark: mark && encoding !== "windows-1252" }));
      let line = above.length + 1;
      const expected = table.map((fields) => {
        const record = { line, fields };
        line += fields.join("").split("\n").length;
        return record;
      });
      expect(await recordsOf(bytes, places, { encoding, separator, linesAbove })).toEqual(expected);
    }), { numRuns: 400 });
  });

  it("turns what Windows-1252 has between 0x80 and 0x9F into its own signs", async () => {
    expect(await recordsOf(Buffer.from([0x80, 0x35, 0x3b, 0x93, 0x94]), [], { encoding: "windows-1252", separator: ";" })).toEqual([{ line: 1, fields: ["\u20ac5", "\u201c\u201d"] }]);
  });

  it("says in which line a UTF-16 file ends within a character", async () => {
    await expect(recordsOf(Buffer.from("a\nb\nc", "utf16le").subarray(0, -1), [3], { encoding: "utf-16le" })).rejects.toThrow(/ends within a character in line 3/);
  });

  it("takes a first line for a separator's name only where it is nothing else", async () => {
    expect(await recordsOf(Buffer.from("sep=;\na;b"), [2], { separator: ";" })).toEqual([{ line: 2, fields: ["a", "b"] }]);
    expect(await recordsOf(Buffer.from('"sep=,"\na,b'))).toEqual([{ line: 2, fields: ["a", "b"] }]);
    expect(await recordsOf(Buffer.from("sep=,x\na,b"))).toEqual([{ line: 1, fields: ["sep=", "x"] }, { line: 2, fields: ["a", "b"] }]);
    expect(await recordsOf(Buffer.from("a,b\nsep=;\n"))).toEqual([{ line: 1, fields: ["a", "b"] }, { line: 2, fields: ["sep=;"] }]);
  });

  it("ends where more lines are to be passed over than there are", async () => {
    expect(await recordsOf(Buffer.from("a,b\n1,2"), [], { linesAbove: 5 })).toEqual([]);
  });
});
