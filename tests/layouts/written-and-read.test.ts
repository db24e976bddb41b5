import { layoutSchema, type Layout } from "@shared/contract/layouts";
import { applyLayout, defaultWords, detectLayout, recognise } from "@shared/layouts";
import { readHead, recordsOf } from "@shared/layouts/read-head";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fileColumns, rowsOf, texts, writeFile, writings, type OurRow, type Writing } from "./write-file";

/** The rows of a file as a layout reads them. */
function rowsIn(head: Uint8Array, layout: Layout, theirColumns = layout.theirColumns): { rows: Record<string, string>[]; problems: unknown[] } {
  const text = readHead(head, layout.encoding);
  const records = text ? recordsOf(text, layout.separator) : [];
  const { columns, read } = applyLayout(layout, theirColumns);
  const found = records.slice(layout.hasHeader ? 1 : 0).map(read);
  return {
    rows: found.map(({ values }) => Object.fromEntries(values.map((value, at) => [columns[at], value]))),
    problems: found.flatMap(({ problems }) => problems),
  };
}

type Sample = { writing: Writing; rows: OurRow[]; order: (typeof fileColumns)[number][]; names: string[]; hasHeader: boolean };

const samples: fc.Arbitrary<Sample> = writings.chain((writing) => {
  const anyScript = writing.encoding !== "windows-1252";
  return fc.record({
    writing: fc.constant(writing), rows: rowsOf({ anyScript, least: 1 }),
    order: fc.shuffledSubarray([...fileColumns], { minLength: fileColumns.length }),
    names: fc.uniqueArray(texts(anyScript), { minLength: fileColumns.length, maxLength: fileColumns.length }),
    hasHeader: fc.boolean(),
  });
});

function layoutOf({ writing, order, names, hasHeader }: Sample): Layout {
  const { encoding, separator, decimal, thousands, dateOrder, weekDay } = writing;
  return {
    kind: "sales", encoding, separator, linesAbove: 0, hasHeader, theirColumns: order.map((_, at) => (hasHeader ? (names[at] ?? "") : "")), decimal, thousands, dateOrder, weekDay,
    mapping: Object.fromEntries(order.map((column, position) => [column, hasHeader ? { from: "name", name: names[position] ?? "" } : { from: "position", position }])),
    words: defaultWords, missingMeans: "zero", tax: "excluded",
  };
}

const fileOf = ({ writing, rows, order, names, hasHeader }: Sample) =>
  writeFile({ rows, writing, names: order.map((column, at) => [column, hasHeader ? (names[at] ?? "") : ""]) });

describe("rows that are written under any layout", () => {
  it("are read back by it as they were", () => {
    fc.assert(fc.property(samples, (sample) => {
      const layout = layoutOf(sample);
      expect(layoutSchema.safeParse(layout).error).toBeUndefined();
      expect(rowsIn(fileOf(sample), layout)).toEqual({ rows: sample.rows, problems: [] });
    }), { numRuns: 400, seed: 4 });
  });

  it("are recognised by it, and read back from columns in another order", () => {
    fc.assert(fc.property(samples.filter(({ hasHeader }) => hasHeader), (sample) => {
      const layout = layoutOf(sample);
      const turned = { ...sample, order: [...sample.order].reverse(), names: [...sample.names].reverse() };
      const found = recognise([layout], fileOf(turned));
      expect(found?.order).toBe("other");
      expect(rowsIn(fileOf(turned), layout, found?.theirColumns)).toEqual({ rows: sample.rows, problems: [] });
    }), { numRuns: 200, seed: 5 });
  });

  it("are read back by the layout that is detected from them, where names are known and weeks follow each other", () => {
    const known = { week: "Week", store: "Shop", product: "SKU", units: "Qty", net_sales: "Net sales", promotion: "Promo" };
    const long = writings.chain((writing) => fc.record({
      writing: fc.constant(writing), rows: rowsOf({ anyScript: writing.encoding !== "windows-1252", least: 13 }),
      order: fc.shuffledSubarray([...fileColumns], { minLength: fileColumns.length }),
    }));
    fc.assert(fc.property(long, ({ writing, rows, order }) => {
      const head = writeFile({ rows, writing, names: order.map((column) => [column, known[column]]) });
      const { layout } = detectLayout(head, "sales");
      expect(rowsIn(head, layout)).toEqual({ rows, problems: [] });
    }), { numRuns: 300, seed: 6 });
  });
});

describe("detecting", () => {
  it("never fails, whatever the bytes, always gives a layout that is one, and the same the next time", () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 600 }), fc.constantFrom("sales" as const, "stores" as const, "events" as const), (head, kind) => {
      const detected = detectLayout(head, kind);
      expect(layoutSchema.safeParse(detected.layout).error).toBeUndefined();
      expect(detectLayout(head, kind)).toEqual(detected);
    }), { numRuns: 300, seed: 7 });
  });

  it("never fails on text of signs that mean something", () => {
    const signs = fc.string({ unit: fc.constantFrom(...'12.,;|\t"\n\r =-/:%W€', "week", "units", "2026-06-08"), maxLength: 200 });
    fc.assert(fc.property(signs, (text) => {
      const { layout } = detectLayout(new TextEncoder().encode(text), "sales");
      expect(layoutSchema.safeParse(layout).error).toBeUndefined();
      expect(() => rowsIn(new TextEncoder().encode(text), layout)).not.toThrow();
    }), { numRuns: 500, seed: 8 });
  });
});
