import { describe, expect, it } from "vitest";
import type { Layout } from "@shared/contract/layouts";
import { detectLayout } from "@shared/layouts";
import { chooseLayout } from "../../server/features/extracts/layouts/choose-layout";
import { layoutNeeded } from "../../server/features/extracts/layouts/layout-needed";
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
