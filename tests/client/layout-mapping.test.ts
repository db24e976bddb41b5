import { describe, expect, it } from "vitest";
import type { Layout } from "@shared/contract/layouts";
import { defaultWords } from "@shared/layouts";
import { dateExample, numberExample, weekExample } from "@/features/extracts/view/layout-examples";
import { adoptColumns, assign, fix, fixedColumns, openColumns, oursAt, surenessWord, warningPlace } from "@/features/extracts/view/layout-mapping";
import { suggestName } from "@/features/extracts/view/layout-name";
import { layoutSentence } from "@/features/extracts/view/layout-words";
import { learnWord, unknownWords, yesOrNo, promotionMeanings } from "@/features/extracts/view/word-meanings";

const layout: Layout = {
  kind: "sales", encoding: "windows-1252", separator: ";", linesAbove: 0, hasHeader: true, theirColumns: ["Week", "Shop", "Price", "Price"],
  decimal: ",", thousands: ".", dateOrder: "dmy", weekDay: "last", mapping: { week: { from: "name", name: "Week" } },
  words: defaultWords, missingMeans: "unknown", tax: "included",
};
const column = (name: string, position: number, more: { samples?: string[]; proposed?: string | null } = {}) => ({
  name, position, samples: [], proposed: null, why: "", ...more,
});

describe("mapping a file's columns", () => {
  it("takes a column by its name where one column alone has it, else by its place", () => {
    expect(assign(layout, 1, "store").mapping.store).toEqual({ from: "name", name: "Shop" });
    expect(assign(layout, 3, "shelf_price").mapping.shelf_price).toEqual({ from: "position", position: 3 });
    expect(assign({ ...layout, hasHeader: false }, 1, "store").mapping.store).toEqual({ from: "position", position: 1 });
  });

  it("gives each column of ours one place only, and each of theirs one meaning", () => {
    const moved = assign(assign(layout, 1, "store"), 2, "store");
    expect(oursAt(moved, 1)).toBeNull();
    expect(oursAt(moved, 2)).toBe("store");
    const replaced = assign(assign(layout, 1, "store"), 1, "product");
    expect(Object.keys(replaced.mapping).sort()).toEqual(["product", "week"]);
    expect(assign(replaced, 1, null).mapping).toEqual(layout.mapping);
  });

  it("holds a value for every row, in place of a column", () => {
    const fixed = fix(assign(layout, 1, "store"), "store", "S01");
    expect(fixedColumns(fixed)).toEqual([{ column: "store", value: "S01" }]);
    expect(oursAt(fixed, 1)).toBeNull();
    expect(fixedColumns(fix(fixed, "store", null))).toEqual([]);
  });

  it("names what is still open, the needed first", () => {
    const open = openColumns(layout);
    expect(open.slice(0, 5).map(({ column: name }) => name)).toEqual(["store", "product", "units", "net_sales", "regular_price"]);
    expect(open.map(({ column: name }) => name)).not.toContain("week");
    expect(open.find(({ column: name }) => name === "feature")?.isNeeded).toBe(false);
  });

  it("takes other columns, and what is proposed for them, where the file is read in another writing", () => {
    const read = adoptColumns({ ...layout, separator: "," }, [column("Date", 0, { proposed: "week" }), column("Till", 1), column("Item", 2, { proposed: "product" })]);
    expect(read.theirColumns).toEqual(["Date", "Till", "Item"]);
    expect(read.mapping).toEqual({ week: { from: "name", name: "Date" }, product: { from: "name", name: "Item" } });
  });

  it("says how sure a proposal is, and beside which setting a warning stands", () => {
    expect([1, 0.9, 0.6, undefined].map(surenessWord)).toEqual(["certain", "likely", "a guess", "proposed"]);
    expect(["dates-ambiguous", "tax-guessed", "repeated-name"].map(warningPlace)).toEqual(["dates", "tax", "columns"]);
  });
});

describe("a layout in words", () => {
  const columns = [column("Week", 0, { samples: ["03/04/2026"] }), column("Sales", 1, { samples: ["12", "1.234,50"] })];
  const sales: Layout = { ...layout, theirColumns: ["Week", "Sales"], mapping: { week: { from: "name", name: "Week" }, net_sales: { from: "name", name: "Sales" } } };

  it("reads the file's own first values by way of example", () => {
    expect(dateExample(sales, columns)).toBe("\u201c03/04/2026\u201d is 3 April 2026");
    expect(dateExample({ ...sales, dateOrder: "mdy" }, columns)).toBe("\u201c03/04/2026\u201d is 4 March 2026");
    expect(dateExample({ ...sales, dateOrder: "iso" }, columns)).toMatch(/cannot be read so/);
    expect(weekExample(sales, columns)).toBe("\u201c03/04/2026\u201d is the week from 28 March 2026 to 3 April 2026");
    expect(numberExample(sales, columns)).toBe("\u201c1.234,50\u201d is 1234.50");
    expect(numberExample({ ...sales, decimal: ".", thousands: "" }, columns)).toBe("\u201c1.234,50\u201d cannot be read so");
    expect(dateExample({ ...sales, mapping: {} }, columns)).toBeNull();
  });

  it("is told in a line", () => {
    expect(layoutSentence(layout)).toBe("Semicolons, decimal comma, days before months, weeks by their last day, Windows-1252");
    expect(layoutSentence({ ...layout, hasHeader: false, tax: "excluded", weekDay: "first" })).toBe(
      "Semicolons, no header, decimal comma, days before months, Windows-1252, without tax",
    );
  });

  it.each([
    ["coast-tills.csv", "Coast tills"],
    ["Sales_North_2026-W24.csv.gz", "Sales North"],
    ["2026-06-08.csv", "New source"],
  ])("of %s is called %s until someone says otherwise", (file, name) => {
    expect(suggestName(file)).toBe(name);
  });
});

describe("words nobody has explained", () => {
  const problem = (name: string, value: string) => ({ line: 2, fields: [], values: [], problems: [{ column: name, value, reason: "" }] });

  it("are asked for once each, with the meanings that their column has", () => {
    const rows = [problem("feature", "gondola"), problem("feature", "gondola"), problem("units", "many")];
    expect(unknownWords({ rows }, { mapping: { promotion: { from: "position", position: 0 } } })).toEqual([
      { word: "gondola", column: "promotion", meanings: promotionMeanings },
    ]);
    expect(unknownWords({ rows }, { mapping: { feature: { from: "position", position: 0 } } })).toEqual([
      { word: "gondola", column: "feature", meanings: yesOrNo },
    ]);
  });

  it("mean one thing once it is said", () => {
    const learnt = learnWord(defaultWords, "Leaflet", { meaning: "display", among: promotionMeanings });
    expect(learnt.display).toContain("Leaflet");
    expect(learnt.feature).not.toContain("leaflet");
    expect(learnt.yes).toEqual(defaultWords.yes);
  });
});
