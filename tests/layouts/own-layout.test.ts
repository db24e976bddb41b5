import { layoutSchema } from "@shared/contract/layouts";
import { detectLayout, missingColumns, ownLayout, unreadableRows } from "@shared/layouts";
import { describe, expect, it } from "vitest";
import { bytesIn } from "./bytes-in";

const utf8 = (...rows: string[]) => bytesIn("utf-8", rows.join("\n"));
const names = ["week", "store", "product", "units", "net_sales", "regular_price"];

describe("our own form", () => {
  it("is known by its names, in any order and case, with others between them", () => {
    const own = ownLayout("stores", [" Name ", "colour", "REGION", "store"]);
    expect(own).toMatchObject({ kind: "stores", encoding: "utf-8", separator: ",", hasHeader: true, dateOrder: "iso", weekDay: "first", tax: "included", missingMeans: "unknown" });
    expect(own?.mapping).toEqual({ store: { from: "name", name: "store" }, name: { from: "name", name: "Name" }, region: { from: "name", name: "REGION" } });
    expect(layoutSchema.parse(own)).toEqual(own);
  });

  it.each([["a needed column is missing", names.slice(1)], ["one of ours stands twice", [...names, "Units"]], ["there are no names", []]])("is another where %s", (_, fields) => {
    expect(ownLayout("sales", fields)).toBeNull();
  });

  it("knows no words but 0, 1 and our mechanics", () => {
    const own = ownLayout("sales", [...names, "feature", "mechanic"]);
    const head = (feature: string, mechanic: string) => utf8([...names, "feature", "mechanic"].join(","), `2026-06-01,S1,P1,1,2,2,${feature},${mechanic}`);
    expect(own && [head("1", "multi_buy"), head("yes", "none"), head("0", "3 for 2")].map((bytes) => unreadableRows(own, bytes))).toEqual([0, 1, 1]);
  });
});

it("the columns that a layout lacks are those that its kind of file needs", () => {
  expect(missingColumns({ kind: "stores", mapping: {} })).toEqual(["store", "name", "region"]);
  expect(missingColumns({ kind: "sales", mapping: Object.fromEntries(names.map((name) => [name, { from: "value", value: "1" }])) })).toEqual([]);
});

it("of a file without rows nothing is unreadable", () => {
  const own = ownLayout("sales", names);
  expect(own && unreadableRows(own, utf8(names.join(",")))).toBe(0);
});

describe("detection that is told something", () => {
  const file = (...weeks: string[]) => utf8(names.join(";"), ...weeks.map((week) => `${week};S1;P1;1;2;2`));

  it.each([
    ["first days of the chain's weeks, whatever their name says", "Week ending", ["2026-06-07", "2026-06-14"], 0, "first", []],
    ["last days of the chain's weeks, whatever their name says", "Week starting", ["2026-06-07", "2026-06-14"], 1, "last", []],
    ["Thursdays for a chain whose weeks begin on Friday", "week", ["2026-06-04", "2026-06-11"], 5, "last", []],
  ])("takes %s", (_, name, days, weekStart, expected, warnings) => {
    const detected = detectLayout(utf8([name, ...names.slice(1)].join(";"), ...days.map((day) => `${day};S1;P1;1;2;2`)), "sales", { weekStart });
    expect(detected.layout.weekDay).toBe(expected);
    expect(detected.warnings.map(({ code }) => code)).toEqual(warnings);
  });

  it.each([["01/06/2026", "dmy", "2026-06-01"], ["06/01/2026", "mdy", "2026-06-01"], ["02/03/2026", "dmy", "2026-03-02"], ["03/02/2026", "mdy", "2026-03-02"]])(
    "reads %s so that the chain's week begins then, and asks all the same", (text, order, day) => {
      const { layout, confidence, warnings } = detectLayout(file(text), "sales", { weekStart: 1 });
      expect({ order: layout.dateOrder, confidence: confidence.dates }).toEqual({ order, confidence: 0.5 });
      expect(warnings.find(({ code }) => code === "dates-ambiguous")?.message).toContain(`"${text}" is taken as ${day}`);
    });

  it("keeps what a person has set, and proposes columns by it", () => {
    const { layout, columns } = detectLayout(utf8("a title", "2026-06-01;S1", "2026-06-08;S2"), "sales", { given: { separator: ",", hasHeader: false, linesAbove: 1 } });
    expect(layout).toMatchObject({ separator: ",", hasHeader: false, linesAbove: 1, theirColumns: [""] });
    expect(columns).toEqual([expect.objectContaining({ theirName: "", samples: ["2026-06-01;S1", "2026-06-08;S2"] })]);
  });

  it("has no columns where the bytes are none of the encoding that was set", () => {
    const { layout } = detectLayout(bytesIn("windows-1252", "caf\u00e9;x\n1;2"), "sales", { given: { encoding: "utf-8" } });
    expect(layout.theirColumns).toEqual([""]);
  });
});

describe("lines above the table", () => {
  const table = [names.join(";"), "2026-06-01;S1;P1;1;2;2", "2026-06-08;S1;P1;1;2;2"];

  it.each([
    ["one title", ["Sales by week"], 1], ["a title and a blank line", ["Sales by week", ""], 2], ["a title and a date beside a name", ["Sales by week", "Made on;2026-06-10;;;;"], 2],
    ["blank lines alone", ["", ""], 0], ["nothing", [], 0],
  ])("are passed over: %s", (_, above, expected) => {
    const { layout, warnings } = detectLayout(utf8(...above, ...table), "sales");
    expect(layout).toMatchObject({ linesAbove: expected, theirColumns: names });
    expect(warnings.map(({ code }) => code)).toEqual(expected > 0 ? ["lines-above-header"] : []);
  });

  it("are not a first row with many empty values", () => {
    const { layout } = detectLayout(utf8("2026-06-01;S1;P1;;;", ...table.slice(1)), "sales");
    expect(layout).toMatchObject({ linesAbove: 0, hasHeader: false });
  });
});
