import { gzipSync } from "node:zlib";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { productsFile, salesFile, salesHeader, storesFile } from "./extracts";

/**
 * What must come of a file: rows read and usable, and the issues as "line column rule". One whose rows are all usable
 * loads.
 */
export type NastyFile = {
  what: string;
  kind?: ExtractKind;
  file: string | Buffer;
  /** What its sender calls it, where that matters, and what we keep of the name. */
  name?: [given: string, kept: string];
  /** Status and code where the upload is refused. */
  refused?: [status: number, code: string];
  /** Code of the reason where no row can be used, and a part of its sentence. */
  unusable?: [code: string, sentence: RegExp];
  rows?: [read: number, usable: number];
  /** Warnings about how it is read, where that was worked out and waits for a person; absent for our own form. */
  proposed?: string[];
  issues?: string[];
};

/** A sales row of product P1 in store S1. */
export const good = (week: string, product = "P1") => `${week},S1,${product},12,21.48,1.79,1.79,0,0,none`;
const [first, second] = [good("2026-06-01"), good("2026-06-08")];
/** A file of texts and bytes, one behind the other. */
export const utf8 = (...parts: (string | number[])[]) => Buffer.concat(parts.map((part) => Buffer.from(part as string)));
/** A sales file of every column: the first row with these cells, the second good. */
export const withCells = (cells: Partial<Record<string, string>>) => {
  const plain: Record<string, string> = {
    week: "2026-06-01", store: "S1", product: "P1", units: "12", net_sales: "21.48", regular_price: "1.79", shelf_price: "1.79",
    feature: "0", display: "0", mechanic: "none", promotion_days: "", open_days: "", stock_out_days: "", unit_cost: "", temperature_c: "", event: "",
  };
  const row = { ...plain, ...cells };
  return `${Object.keys(row).join(",")}\n${Object.values(row).join(",")}\n${Object.values({ ...plain, week: "2026-06-08" }).join(",")}\n`;
};
/** A file whose first row has this cell, with what is found there; the second row is good. */
export const cell = (column: string, value: string, rule: string, isUsable = false): NastyFile => ({
  what: `${JSON.stringify(value).slice(0, 60)} in ${column}`, file: withCells({ [column]: value }),
  rows: [2, isUsable ? 2 : 1], issues: [`2 ${column} ${rule}`],
});

/** Files as they are: whole, cut, mis-encoded, mis-quoted. */
export const nastyForms: NastyFile[] = [
  { what: "a header alone", file: `${salesHeader}\n`, unusable: ["no-rows", /header, but no rows/] },
  { what: "blank lines alone", file: "\n\n \n\n", unusable: ["no-header", /no lines/] },
  { what: "a file of stores sent as sales", file: storesFile, proposed: [], unusable: ["layout-needed", /looks like a file of stores/] },
  { what: "a character cut off at the end", file: utf8(salesFile(first), [0xe2, 0x82]), unusable: ["not-utf-8", /line 2/] },
  { what: "a NUL byte far into the file", file: `${salesFile(...Array.from({ length: 200 }, (_, at) => good("2026-06-01", at === 190 ? "P\0" : "P1")))}`, rows: [200, 1] },
  { what: "no line end in the first megabyte", file: "x".repeat(1_500_000), unusable: ["no-header", /no header/] },
  { what: "a gzip file cut short", file: gzipSync(salesFile(...Array.from({ length: 500 }, () => first))).subarray(0, -40), unusable: ["broken-gzip", /damaged or ends early/] },
  { what: "a gzip file with a workbook in it", file: gzipSync(Buffer.from("PK\x03\x04 and so on")), unusable: ["not-a-csv-file", /workbook/] },
  { what: "a decompression bomb", file: gzipSync(Buffer.concat([Buffer.from(`${salesHeader}\n`), Buffer.alloc(80 * 1024 ** 2, "x")])), unusable: ["expands-too-much", /larger than sales data/] },
  { what: "a byte order mark, capitals in the header and Windows line ends", file: `\ufeff${salesFile(first, second).replace("week", " Week ").replaceAll("\n", "\r\n")}\r\n`, rows: [2, 2], issues: [] },
  { what: "line ends of old Macintoshes", file: salesFile(first, second).replaceAll("\n", "\r"), rows: [2, 2], issues: [] },
  { what: "no line end at the end, and blank lines between rows", file: salesFile(first, "", second), rows: [2, 2], issues: [] },
  { what: "every value in quotes", file: salesFile(first, second).replace(/[^,\n]+/g, '"$&"'), rows: [2, 2], issues: [] },
  { what: "rows of commas, as spreadsheets leave them", file: salesFile(first, ",,,,,,,,,", `${second},,,`), rows: [2, 2], issues: [] },
  { what: "a row with too few fields and one with too many", file: salesFile("2026-06-01,S1,P1", first, `${second},0,1`), rows: [3, 1], issues: ["2  ragged-row", "4  ragged-row"] },
  { what: "a quote that is never closed", file: salesFile(`"${first}`, first, second), rows: [3, 2], issues: ["2  open-quote"] },
  { what: "quotes opened in two lines", file: salesFile(first, `"${second}`, `"${good("2026-05-25")}`, good("2026-05-18")), rows: [4, 2], issues: ["2 week missing-weeks", "3  open-quote", "4  open-quote"] },
  { what: "text behind a closing quote", file: salesFile(first.replace("S1", '"S"1'), second), rows: [2, 1], issues: ["2  open-quote"] },
  { what: "line ends inside quotes, counted as lines of the file", file: `${salesHeader},note\n${first},"two\nlines"\n${second.replace("12", "x")},"one"\n`, rows: [2, 1], issues: ["1  unknown-column", "4 units not-a-number"] },
  { what: "a line of 10 MB", file: salesFile(first, "x".repeat(10 * 1024 ** 2), second), rows: [3, 2], issues: ["3  open-quote"] },
  { what: "an open quote before more than 1 MB of rows", file: salesFile(`"${first}`, second, ...Array.from({ length: 30_000 }, () => second)), rows: [30_002, 1] },
  { what: "columns that are not ours", file: `${salesHeader},colour,\n${first},red,\n`, rows: [1, 1], issues: ["1  unknown-column"] },
];

/** Values of sales that cannot be, one in each file. */
export const nastyCells: NastyFile[] = [
  cell("units", "", "missing-value"), cell("units", "twelve", "not-a-number"), cell("units", '"1,5"', "not-a-number"), cell("units", "1 000", "not-a-number"),
  cell("units", "=1+1", "not-a-number"), cell("units", "0x1F", "not-a-number"), cell("units", "Infinity", "not-a-number"), cell("units", "1.2345", "too-many-decimals"),
  cell("units", "1e12", "too-large"), cell("units", `1.${"0".repeat(20_000)}`, "not-a-number"), cell("units", "-3", "net-returns", true),
  cell("net_sales", "€ 21.48", "not-a-number"), cell("net_sales", "9999999999.99999", "too-large"), cell("net_sales", "21.48001", "rounded", true),
  cell("net_sales", "-1", "negative-net-sales"), cell("net_sales", "0", "units-without-sales", true), cell("regular_price", "-1", "negative-amount"),
  cell("shelf_price", "0.00", "zero-price", true), cell("feature", "yes", "not-a-flag"), cell("display", "2", "not-a-flag"), cell("mechanic", "bogof", "unknown-mechanic"),
  cell("open_days", "8", "not-days"), cell("stock_out_days", "1.5", "not-days"), cell("temperature_c", "451", "temperature-out-of-range"),
  cell("event", "e".repeat(65), "too-long"), cell("event", '"spring\tfair"', "control-character"),
  cell("week", "2026-06-02", "not-week-start"), cell("week", "01/06/2026", "bad-week"), cell("week", "2026-02-30", "bad-week"), cell("week", "2026-W54", "bad-week"),
  cell("week", "", "missing-value"), cell("week", "1890-06-02", "week-out-of-range"), cell("week", "2199-06-03", "week-out-of-range"), cell("week", "46174", "bad-week"),
  cell("store", "S9", "unknown-store"), cell("store", "s1", "unknown-store"), cell("product", "P9", "unknown-product"), cell("product", "4006381333931", "unknown-product"),
  cell("product", "🍎", "unknown-product"), cell("store", "'; drop table stores; --", "unknown-store"),
  { what: "an ISO week number, a GTIN for the product, and a large round number", file: withCells({ week: "2026-W23", product: "2000000000015", units: "1e+05", net_sales: "1.79e+05" }), rows: [2, 2], issues: [] },
  { what: "net sales without units", file: withCells({ units: "0" }), rows: [2, 1], issues: ["2 net_sales sales-without-units"] },
  { what: "more sold-out days than open ones", file: withCells({ open_days: "5", stock_out_days: "6" }), rows: [2, 1], issues: ["2 stock_out_days sold-out-too-long"] },
  { what: "several faults in a row", file: withCells({ store: "S9", units: "x", feature: "?" }), rows: [2, 1], issues: ["2 feature not-a-flag", "2 store unknown-store", "2 units not-a-number"] },
  { what: "the same row twice", file: salesFile(first, second, first), rows: [3, 2], issues: ["4  repeated-row"] },
  { what: "rows that contradict each other", file: salesFile(first, second, first.replace("12", "13")), rows: [3, 1], issues: ["2  contradicting-rows", "4  contradicting-rows"] },
  { what: "no row without an error", file: salesFile(first.replace("S1", "S9")), unusable: ["no-usable-row", /The one row has an error/], rows: [1, 0], issues: ["2 store unknown-store"] },
];

export const lines = (...rows: string[]) => rows.join("\n");

/** Files of the catalogue's kinds. */
export const nastyCatalogue: NastyFile[] = [
  { what: "a store that closed before it opened", kind: "stores", file: lines("store,name,region,opened,closed", "S5,X,coast,2020-02-01,2020-01-01", "S6,Y,coast,,"), rows: [2, 1], issues: ["2 closed last-before-first"] },
  { what: "a store without a name, and one with a day that is none", kind: "stores", file: lines("store,name,region,opened", "S5,,coast,", "S6,Y,coast,1st May", "S7,Z,moor,2020-02-29"), rows: [3, 1], issues: ["2 name missing-value", "3 opened bad-day"] },
  { what: "a store twice with different names", kind: "stores", file: lines("store,name,region", "S5,X,coast", "S5,Y,coast", "S6,Z,moor"), rows: [3, 1], issues: ["2  contradicting-rows", "3  contradicting-rows"] },
  { what: "a GTIN spoilt by a spreadsheet, and a tax rate in percent", kind: "products", file: lines("product,name,category,gtin,tax_rate", "P5,X,snacks,2E+12,", "P6,Y,snacks,,21", "P7,Z,snacks,20000004,0.21"), rows: [3, 1], issues: ["2 gtin bad-gtin", "3 tax_rate bad-tax-rate"] },
  { what: "terms of a product under two names", kind: "products", file: `${productsFile}\nP1,Oat biscuit,2000000000015,Larkfield,snacks,0,2026-06-01,0.90,2.09,0.21`, rows: [4, 3], issues: ["5 product contradicting-rows"] },
  { what: "an event that ends before it begins, and one in a region without stores", kind: "events", file: lines("event,name,first_day,last_day,region", "fair,Fair,2026-06-05,2026-06-01,", "fair,Fair,2026-06-05,2026-06-07,islands"), rows: [2, 1], issues: ["2 last_day last-before-first", "3 region unknown-region"] },
  { what: "temperatures for no place, for both, and for an unknown store", kind: "temperatures", file: lines("week,region,store,temperature_c", "2026-06-01,,,14", "2026-06-01,coast,S1,14", "2026-06-01,,S9,14", "2026-06-01,moor,,14", "2026-06-01,coast,,hot"), rows: [5, 1], issues: ["2 region store-or-region", "3 region store-or-region", "4 store unknown-store", "6 temperature_c not-a-number"] },
];
