import type { Layout } from "@shared/contract/layouts";
import { applyLayout, defaultWords, LayoutError } from "@shared/layouts";
import { describe, expect, it } from "vitest";
import { aLayout } from "./a-layout";

/** One value of one column, read under a layout. */
function read(column: string, text: string, changes: Partial<Layout> = {}) {
  const { values, problems } = applyLayout(aLayout({ columns: [column], ...changes })).read([text]);
  return problems[0]?.reason ?? values[0];
}

describe("a record is read", () => {
  it("into our columns, in the mapping's order, wherever they stand in the file", () => {
    const layout = aLayout({ columns: ["week", "store", "units"], decimal: ",", thousands: ".", dateOrder: "dmy" });
    const reader = applyLayout(layout, ["units", "extra", "store", "week"]);
    expect(reader.columns).toEqual(["week", "store", "units"]);
    expect(reader.read(["1.234,5", "?", " S1 ", "08.06.2026"])).toEqual({ values: ["2026-06-08", "S1", "1234.5"], problems: [] });
  });

  it("by positions where there is no header, and with fixed values", () => {
    const layout = aLayout({ columns: ["store", "units"], hasHeader: false, mapping: {
      units: { from: "position", position: 1 }, store: { from: "value", value: "S9" }, regular_price: { from: "value", value: "" },
    } });
    expect(applyLayout(layout).read(["x", "5"]).values).toEqual(["S9", "5", ""]);
  });

  it("with a problem for each value that cannot be read, and nothing in its place", () => {
    const layout = aLayout({ columns: ["week", "store", "units"], decimal: "," });
    expect(applyLayout(layout).read(["2026-02-30", "S1", "1.234,5"])).toEqual({
      values: ["", "S1", ""],
      problems: [
        { column: "week", value: "2026-02-30", reason: "There is no such day in the calendar" },
        { column: "units", value: "1.234,5", reason: 'The value is not a number as the layout has them (decimals by ",")' },
      ],
    });
  });

  it("with empty values where fields are empty or missing: whether they may be is the check's to say", () => {
    expect(applyLayout(aLayout()).read(["", "  "])).toEqual({ values: ["", "", ""], problems: [] });
  });

  it("never where a mapped column is not in the file's header", () => {
    expect(() => applyLayout(aLayout(), ["week", "shop", "units"])).toThrow(
      new LayoutError("missing-columns", "The file lacks columns that its layout reads: store."),
    );
    const byPosition = aLayout({ mapping: { units: { from: "position", position: 2 } } });
    expect(() => applyLayout(byPosition, ["week", "store"])).toThrow("The file lacks columns that its layout reads: the one at position 2.");
  });

  it("with a header in other case, blanks or accents as the same header", () => {
    const layout = aLayout({ columns: ["units"], mapping: { units: { from: "name", name: "Quantité vendue" } }, theirColumns: ["Quantité vendue"] });
    expect(applyLayout(layout, ["QUANTITE  VENDUE"]).read(["3"]).values).toEqual(["3"]);
  });
});

describe("a number", () => {
  it.each([
    ["1234", "1234"], ["1,234", "1234"], ["1,234,567.80", "1234567.80"], ["-0.5", "-0.5"], [".5", "0.5"], ["5.", "5"], ["+7", "7"], ["12-", "-12"],
    ["\u2212 3", "-3"], ["€ 1.99", "1.99"], ["1.99 EUR", "1.99"], ["£1,200.00", "1200.00"], ["007", "007"],
  ])("%j is %s with points and commas for thousands", (text, number) => {
    expect(read("units", text, { thousands: "," })).toBe(number);
  });

  it.each([["1 234,5", " "], ["1\u00a0234,5", " "], ["1\u202f234,5", " "], ["1.234,5", "."], ["1'234,5", "'"], ["1’234,5", "'"]] as const)(
    "%j is 1234.5 with decimal commas and its sign for thousands", (text, thousands) => {
      expect(read("units", text, { decimal: ",", thousands })).toBe("1234.5");
    },
  );

  it.each(["12,34", "1,2345", "0,123", "1.2.3", "1,234.5,6", "--1", "-1-", "", "abc", "1e5", "٣", "1 234", "1".repeat(41), "NaN"].filter(Boolean))(
    "%j is none with points and commas for thousands", (text) => {
      expect(read("units", text, { thousands: "," })).toBe('The value is not a number as the layout has them (decimals by ".", thousands by ",")');
    },
  );

  it.each([["21 %", "0.21"], ["21%", "0.21"], ["5.5%", "0.055"], ["0%", "0"], ["100%", "1"], ["0.21", "0.21"], ["121%", "1.21"]])("%s of tax is the share %s", (text, share) => {
    expect(read("tax_rate", text, { kind: "products" })).toBe(share);
  });
});

describe("a day or week", () => {
  it.each([
    ["2026-06-08", "iso"], ["2026/6/8", "iso"], ["2026.06.08.", "iso"], ["20260608", "iso"], ["2026-06-08T00:00:00Z", "iso"], ["2026-06-08 00:00", "dmy"],
    ["08.06.2026", "dmy"], ["8/6/26", "dmy"], ["8-6-2026", "dmy"], ["06/08/2026", "mdy"], ["6/8/26 12:00:00 AM", "mdy"],
    ["8 June 2026", "iso"], ["8-Jun-26", "iso"], ["8. Juni 2026", "iso"], ["8 juin 2026", "dmy"], ["8 jun 2026", "mdy"],
  ] as const)("%j under %s is 8 June 2026", (text, dateOrder) => {
    expect(read("week", text, { dateOrder })).toBe("2026-06-08");
  });

  it.each(["1 März 2026", "1 mars 2026", "1 marzo 2026", "1 maart 2026", "1 Mar 2026"])("%s is 1 March", (text) => {
    expect(read("week", text)).toBe("2026-03-01");
  });

  it("has years from 70 on in the last century where two digits are given", () => {
    expect([read("opened", "01.01.69", { kind: "stores", dateOrder: "dmy" }), read("opened", "01.01.70", { kind: "stores", dateOrder: "dmy" })]).toEqual(["2069-01-01", "1970-01-01"]);
  });

  it.each(["2026-W24", "2026W24", "2026-KW24", "KW 24/2026", "W24 2026", "S24-2026", "202624"])("%s stays an ISO week, whichever day weeks are given by", (text) => {
    expect(read("week", text, { weekDay: "last" })).toBe("2026-W24");
  });

  it("given by its last day becomes its first, over months, years and leap days", () => {
    expect(["2026-06-14", "2026-01-04", "2024-03-03"].map((text) => read("week", text, { weekDay: "last" }))).toEqual(["2026-06-08", "2025-12-29", "2024-02-26"]);
  });

  it("other than a week is not moved by it", () => {
    expect(read("opened", "2026-06-14", { kind: "stores", weekDay: "last" })).toBe("2026-06-14");
  });

  it.each([
    ["31.02.2026", "dmy", "There is no such day in the calendar"],
    ["06/27/2026", "dmy", "There is no such day in the calendar; the layout says that the day comes first"],
    ["27/06/2026", "mdy", "There is no such day in the calendar; the layout says that the month comes first"],
    ["08.06.2026", "iso", "The layout says that days begin with the year"],
    ["46181", "iso", "The value is a spreadsheet's day number, 2026-06-08 if counted from 1900; format the column as dates there"],
    ["2026-W54", "iso", "Weeks of a year are numbered from 1 to 53"],
    ["202654", "iso", "The value is not a day"],
    ["soon", "dmy", "The value is not a day"],
    ["29.02.2025", "dmy", "There is no such day in the calendar"],
    ["8 Brumaire 2026", "dmy", "The value is not a day"],
  ] as const)("%s under %s: %s", (text, dateOrder, reason) => {
    expect(read("week", text, { dateOrder })).toBe(reason);
  });

  it("is no day where it is a week", () => {
    expect(read("opened", "2026-W24", { kind: "stores" })).toBe("A week stands where a day is needed");
  });
});

describe("a word", () => {
  it.each([["1", "1"], ["Yes", "1"], ["JA", "1"], ["oui", "1"], ["0", "0"], ["nein", "0"], ["", ""]])("%j of a yes or no is %j", (text, flag) => {
    expect(read("feature", text)).toBe(flag);
  });

  it("of a mechanic is ours, by the layout's lists", () => {
    const words = { ...defaultWords, multi_buy: ["Bündel"] };
    expect([read("mechanic", "bündel", { words }), read("mechanic", "PRICE_CUT", { words }), read("mechanic", "Keine", { words })]).toEqual(["multi_buy", "price_cut", "none"]);
  });

  it("in no list is a problem", () => {
    expect(read("feature", "blue")).toBe("The word is in neither of the layout's lists for yes and no");
    expect(read("mechanic", "blue")).toBe("The word is in none of the layout's lists of promotions");
    expect(read("mechanic", "Leaflet")).toBe("The word is in none of the layout's lists of promotions");
  });
});

describe("a single word for the promotion", () => {
  const layout = aLayout({ columns: ["units", "promotion"] });

  it.each([
    ["Leaflet", ["1", "0", "none"]], ["Secondary placement", ["0", "1", "none"]], ["Feature & Display", ["1", "1", "none"]], ["3 for 2", ["0", "0", "multi_buy"]],
    ["Leaflet + 3 for 2", ["1", "0", "multi_buy"]], ["display/coupon", ["0", "1", "coupon"]], ["leaflet, end cap, discount", ["1", "1", "price_cut"]],
    ["none", ["0", "0", "none"]], ["", ["0", "0", "none"]], ["price cut + coupon", ["0", "0", "price_cut"]],
  ])("%j becomes feature, display and mechanic", (word, [feature, display, mechanic]) => {
    const reader = applyLayout(layout);
    expect(reader.columns).toEqual(["units", "feature", "display", "mechanic"]);
    expect(reader.read(["5", word])).toEqual({ values: ["5", feature, display, mechanic], problems: [] });
  });

  it("that nobody knows is one problem", () => {
    expect(applyLayout(layout).read(["5", "leaflet + fireworks"])).toEqual({
      values: ["5", "", "", ""],
      problems: [{ column: "feature", value: "leaflet + fireworks", reason: "The word is in none of the layout's lists of promotions" }],
    });
  });

  it("gives way to columns that the file has for its parts", () => {
    const both = aLayout({ columns: ["mechanic", "promotion"] });
    const reader = applyLayout(both);
    expect(reader.columns).toEqual(["mechanic", "feature", "display"]);
    expect(reader.read(["coupon", "Feature + 3 for 2"]).values).toEqual(["coupon", "1", "0"]);
  });

  it("can be the same for the whole file", () => {
    const fixed = aLayout({ columns: ["units"], mapping: { promotion: { from: "value", value: "Leaflet" } } });
    expect(applyLayout(fixed).read(["5"]).values).toEqual(["1", "0", "none"]);
  });
});

describe("a code", () => {
  it("keeps its zeros and is freed of a spreadsheet's wrapping", () => {
    expect([read("store", " 0012 "), read("store", '="0012"'), read("product", "04006381333931")]).toEqual(["0012", "0012", "04006381333931"]);
  });

  it("that a spreadsheet shortened is a problem", () => {
    expect(read("product", "4.00638E+12")).toBe("A spreadsheet has shortened this number; its digits are lost. Format the column as text there");
  });
});
