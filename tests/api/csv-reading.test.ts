import fc from "fast-check";
import Papa from "papaparse";
import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { decodeText } from "../../server/features/extracts/read/decode-text";
import { expandBytes } from "../../server/features/extracts/read/expand-bytes";
import { readRecords, type CsvRecord } from "../../server/features/extracts/read/read-records";

/** The bytes in pieces, cut where the numbers say. */
async function* inPieces(bytes: Buffer, cuts: number[]): AsyncGenerator<Buffer> {
  const places = [0, ...cuts.map((cut) => cut % (bytes.length + 1)).sort((a, b) => a - b), bytes.length];
  for (let at = 1; at < places.length; at++) yield bytes.subarray(places[at - 1], places[at]);
}

async function recordsOf(bytes: Buffer, cuts: number[] = []): Promise<CsvRecord[]> {
  const records: CsvRecord[] = [];
  const expanded = expandBytes(inPieces(bytes, cuts), { onRead: () => undefined, limitBytes: 1e9 });
  for await (const batch of readRecords(decodeText(expanded))) records.push(...batch);
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
