import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { csvLine, csvLines, csvText, harmless, withoutGuard } from "../../shared/csv";

const signs = ["=", "+", "-", "@", "\t", "\r"];

describe("a text for a spreadsheet", () => {
  it.each(signs)("that begins with %j gets an apostrophe in front", (sign) => {
    expect(harmless(`${sign}1+1`)).toBe(`'${sign}1+1`);
  });

  it("is left alone where nothing would be run", () => {
    for (const text of ["", "S1", "1-1", " =1", "a\t", "'quoted'", "''"]) expect(harmless(text)).toBe(text);
  });

  it("comes back exactly as it was, however many apostrophes it had", () => {
    for (const sign of ["", ...signs]) {
      for (const before of ["", "'", "''", "x", " "]) {
        const text = `${before}${sign}1`;
        expect(withoutGuard(harmless(text))).toBe(text);
      }
    }
  });

  it("is never one that begins with a sign", () => {
    for (const sign of signs) expect(signs).not.toContain(harmless(sign).charAt(0));
  });
});

describe("a line of CSV", () => {
  it("keeps numbers as numbers, also below zero, and leaves missing cells empty", () => {
    expect(csvLine([-2.3, 1e-7, null, 0])).toBe("-2.3,1e-7,,0");
  });

  it.each(['say "no"', "a,b", "two\nlines", "two\r\nlines", " blank before", "blank behind ", "=1,2", "\tx", "\r", ""])("gives a reader back %j", (text) => {
    expect(Papa.parse<string[]>(csvLine(["first", text, "last"])).data[0]?.map(withoutGuard)).toEqual(["first", text, "last"]);
  });

  it("ends with a return and a line feed in a file, and has none behind the last of a table", () => {
    expect(csvLines([["a", 1], ["b", 2]])).toBe("a,1\r\nb,2\r\n");
    expect(csvLines([])).toBe("");
    expect(csvText({ columns: ["=name", "n"], rows: [["a", 1]] })).toBe("'=name,n\r\na,1");
  });
});
