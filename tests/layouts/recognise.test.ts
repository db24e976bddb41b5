import { recognise, applyLayout, detectLayout } from "@shared/layouts";
import { describe, expect, it } from "vitest";
import { aLayout } from "./a-layout";
import { bytesIn } from "./bytes-in";
import { sampleHeads } from "./sample-heads";

const utf8 = (...rows: string[]) => bytesIn("utf-8", rows.join("\n"));
const columns = ["week", "store", "units"];
const layout = aLayout({ columns });
const file = utf8("week,store,units", "2026-06-15,S1,5.5", "2026-06-15,S2,6");

describe("a saved layout is recognised", () => {
  it("by the names of the header, in the same order", () => {
    expect(recognise([layout], file)).toEqual({ index: 0, layout, order: "same", theirColumns: columns });
  });

  it("by the names in another order, which is answered for reading", () => {
    const found = recognise([layout], utf8("units,week,store", "5.5,2026-06-15,S1"));
    expect(found).toMatchObject({ order: "other", theirColumns: ["units", "week", "store"] });
    expect(found && applyLayout(found.layout, found.theirColumns).read(["5.5", "2026-06-15", "S1"]).values).toEqual(["2026-06-15", "S1", "5.5"]);
  });

  it("with a header only, and with names in other case", () => {
    expect(recognise([layout], utf8("Week,STORE,Units"))?.order).toBe("same");
  });

  it("whichever of UTF-8 and Windows-1252 it says, where a file has ASCII alone", () => {
    expect(recognise([aLayout({ columns, encoding: "windows-1252" })], file)?.index).toBe(0);
  });

  it("without a header by as many columns whose values can be read", () => {
    const bare = aLayout({ columns, hasHeader: false });
    expect(recognise([bare], utf8("2026-06-15,S1,5.5", "2026-06-15,S2,6"))?.index).toBe(0);
    expect(recognise([bare], utf8("S1,2026-06-15,5.5", "S2,2026-06-15,6"))).toBeNull();
    expect(recognise([bare], utf8("2026-06-15,S1,5.5,x"))).toBeNull();
  });

  it("by which more rows can be read, of two with the same names", () => {
    const [dayFirst, monthFirst] = [aLayout({ columns, dateOrder: "dmy" }), aLayout({ columns, dateOrder: "mdy" })];
    const mixed = utf8("week,store,units", "06/15/2026,S1,5", "06/08/2026,S1,5", "06/01/2026,S1,5");
    expect(recognise([dayFirst, monthFirst], mixed)?.index).toBe(1);
  });

  it("in its own order before another, and else as the first in the list", () => {
    const turned = aLayout({ columns: ["store", "week", "units"] });
    expect(recognise([turned, layout, layout], file)?.index).toBe(1);
  });

  it.each(sampleHeads.filter(({ warnings = [] }) => !warnings.includes("serial-days") && !warnings.includes("shortened-codes")))("on the file it was detected from: $title", ({ head, kind = "sales" }) => {
    const detected = detectLayout(head, kind).layout;
    expect(recognise([detected], head)).toEqual({ index: 0, layout: detected, order: "same", theirColumns: detected.theirColumns });
  });
});

describe("no layout is recognised", () => {
  it("where there is none", () => {
    expect(recognise([], file)).toBeNull();
  });

  it.each([
    ["a name is another", utf8("week,shop,units", "2026-06-15,S1,5")],
    ["a column is missing", utf8("week,store", "2026-06-15,S1")],
    ["a column is new", utf8("week,store,units,extra", "2026-06-15,S1,5,x")],
    ["the separator is another", utf8("week;store;units", "2026-06-15;S1;5")],
    ["the encoding is another", bytesIn("utf-16le", "week,store,units\n2026-06-15,S1,5")],
    ["most rows cannot be read", utf8("week,store,units", "15/06/2026,S1,5", "22/06/2026,S1,5", "2026-06-29,S1,5")],
    ["the file is empty", new Uint8Array()],
    ["the file is no text", Uint8Array.from({ length: 4_096 }, (_, at) => (at * 7_919 + (at >> 3)) & 255)],
  ])("where %s", (_, head) => {
    expect(recognise([layout], head)).toBeNull();
  });

  it("in another order where a column is known by its position alone", () => {
    const byPosition = aLayout({ columns, mapping: { ...layout.mapping, units: { from: "position", position: 2 } } });
    expect(recognise([byPosition], utf8("units,week,store", "5,2026-06-15,12"))).toBeNull();
  });

  it("where accents would be read in another encoding", () => {
    const windows = aLayout({ columns, encoding: "windows-1252" });
    expect(recognise([windows], utf8("week,store,units", "2026-06-15,Köln,5"))).toBeNull();
  });
});

describe("the day on which the chain's weeks begin", () => {
  const [first, last] = [aLayout({ columns }), aLayout({ columns, weekDay: "last" })];
  const sundays = utf8("week,store,units", "2026-06-14,S1,5", "2026-06-21,S1,5");

  it("tells layouts apart that read the same names", () => {
    expect(recognise([first, last], sundays, { weekStart: 1 })?.index).toBe(1);
    expect(recognise([first, last], sundays, { weekStart: 0 })?.index).toBe(0);
    expect(recognise([first, last], sundays)?.index).toBe(0);
  });

  it("keeps a layout from a file whose weeks would be none of the chain", () => {
    expect(recognise([first], sundays, { weekStart: 1 })).toBeNull();
  });
});
