import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Layout } from "@shared/contract/layouts";
import { detectLayout } from "@shared/layouts";
import { chooseLayout } from "../../server/features/extracts/layouts/choose-layout";
import { UnreadableFile } from "../../server/features/extracts/read/unreadable-file";
import { layoutNeeded } from "../../server/features/extracts/layouts/layout-needed";
import { previewLayout } from "../../server/features/extracts/layouts/preview-layout";
import { bytesIn } from "../layouts/bytes-in";
import { good } from "../support/nasty-files";
import { salesFile, salesHeader, storesFile } from "../support/extracts";

const choose = (text: string, { saved = [], weekStart = 1 }: { saved?: Layout[]; weekStart?: number } = {}) => chooseLayout(Buffer.from(text), { kind: "sales", saved, weekStart });
const dayFirst = salesFile(good("25/05/2026"), good("01/06/2026"));

describe("how a file is read", () => {
  it("is our own form where its header is ours, even where a saved layout has the same names", () => {
    const own = salesFile(good("2026-05-25"), good("2026-06-01"));
    const saved: Layout = { ...detectLayout(Buffer.from(own), "sales").layout, tax: "excluded" };
    expect(choose(own, { saved: [saved] })).toMatchObject({ origin: "own", layout: { tax: "included" } });
  });

  it("is our own form with some bad rows, or none", () => {
    expect(choose(salesFile(good("x"), good("2026-06-01"))).origin).toBe("own");
    expect(choose(salesHeader).origin).toBe("own");
  });

  it("is our own form with bad rows alone, where no other way reads more of them", () => {
    expect(choose(salesFile(good("x"), good("y"))).origin).toBe("own");
  });

  it("is worked out where our names stand above values that are written otherwise", () => {
    expect(choose(dayFirst)).toMatchObject({ origin: "proposed", layout: { dateOrder: "dmy" } });
  });

  it("is a saved layout's, where one reads values that our own form does not", () => {
    const saved = detectLayout(Buffer.from(dayFirst), "sales").layout;
    expect(choose(dayFirst, { saved: [{ ...saved, separator: ";" }, saved] })).toEqual({ origin: "saved", layout: saved, index: 1 });
  });

  it("is worked out where a saved layout's weeks would be none of the chain", () => {
    const text = salesFile(good("25/05/2026"), good("01/06/2026")).replaceAll(",", ";");
    const saved = detectLayout(Buffer.from(text), "sales", { weekStart: 1 }).layout;
    expect(choose(text, { saved: [saved] }).origin).toBe("saved");
    expect(choose(text, { saved: [saved], weekStart: 3 }).origin).toBe("proposed");
  });

  it.each([["no bytes", ""], ["blank lines", " \n\n"], ["a first line without an end", "x".repeat(65_536)]])("is not to be told of %s", (_, text) => {
    expect(() => choose(text)).toThrow(expect.objectContaining({ code: "no-header" }));
  });
});

describe("columns that a layout lacks are named", () => {
  const needed = (text: string) => {
    const head = Buffer.from(text);
    return layoutNeeded(head, detectLayout(head, "sales").layout)?.message;
  };

  it("with those that the file has, and what to do", () => {
    expect(needed("week;store;colour\n2026-06-01;S1;red\n")).toBe(
      'No column of the file is taken for product, units, net_sales and regular_price, which a sales file needs. It has: week, store and colour. Say under "How it is read" which column holds what; the file need not be uploaded again.');
  });

  it("with the kind of file that it seems to be", () => {
    expect(needed(storesFile)).toMatch(/It looks like a file of stores: upload it as that\.$/);
  });

  it("and with why a column was not taken", () => {
    expect(needed("store;product;2026-05-18;2026-05-25;2026-06-01\nS1;P1;12;13;14")).toMatch(/The file has a column for each week|a column for each week/);
  });

  it("and none where all are there", () => {
    expect(needed(salesFile(good("2026-06-01")))).toBeUndefined();
  });
});

describe("whatever a file's head holds", () => {
  const piece = fc.constantFrom("week", "store", "units", "\ud83c\udf4e", "\u05d7", "01/06/2026", "2026-06-01", "0100-01-03", "9999-12-31", "46174", "1.234,5", "-", "\"", "sep=;", ";", ";", ",", "\t", "|", "\n", "\n", "\r\n", " ", "\0", "=", "E+12");
  const heads = fc.oneof(
    fc.tuple(fc.constantFrom("utf-8" as const, "utf-16le" as const, "utf-16be" as const), fc.array(piece, { maxLength: 60 })).map(([encoding, pieces]) => bytesIn(encoding, pieces.join(""))),
    fc.uint8Array({ maxLength: 200 }),
  );

  it("it is chosen how to read it, and shown, or said why it cannot be read", async () => {
    await fc.assert(fc.asyncProperty(heads, fc.constantFrom("first" as const, "last" as const), async (head, weekDay) => {
      let layout: Layout;
      try {
        ({ layout } = chooseLayout(head, { kind: "sales", saved: [], weekStart: 1 }));
      } catch (error) {
        expect(error).toBeInstanceOf(UnreadableFile);
        return;
      }
      layoutNeeded(head, layout);
      const preview = await previewLayout(head, { layout: { ...layout, weekDay }, calendar: { kind: "iso", weekStart: 1 } });
      expect(preview.fileColumns).toHaveLength(layout.theirColumns.length);
      for (const { values } of preview.rows) expect(values).toHaveLength(preview.columns.length);
    }), { numRuns: 1_500 });
  });
});
