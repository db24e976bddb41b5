import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { toCsv } from "@/lib/csv";
import { fileNameOf } from "@/lib/download";

describe("CSV for spreadsheets", () => {
  it.each(["=1+1", "+1", "-1", "@sum", "\tx", "\rx"])("makes text that begins as %j harmless", (text) => {
    const [row] = Papa.parse<string[]>(toCsv({ columns: ["value"], rows: [[text]] })).data.slice(1);
    expect(row[0]).toBe(`'${text}`);
  });

  it("makes headings harmless too", () => {
    expect(Papa.parse<string[]>(toCsv({ columns: ["=cmd"], rows: [] })).data[0]).toEqual(["'=cmd"]);
  });

  it("leaves numbers as numbers, also below zero", () => {
    expect(toCsv({ columns: ["a", "b"], rows: [[-2.3, 1e-7]] })).toBe("a,b\r\n-2.3,1e-7");
  });

  it("quotes what needs it and leaves missing cells empty", () => {
    expect(toCsv({ columns: ["a", "b"], rows: [['say "no", please', null]] })).toBe('a,b\r\n"say ""no"", please",');
  });

  it("names files after their title in any language", () => {
    expect(fileNameOf("Units: Lambség, wk 24–29!")).toBe("units-lambség-wk-24-29");
    expect(fileNameOf("…")).toBe("shelftide");
  });
});
