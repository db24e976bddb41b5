import { gzipSync } from "node:zlib";
import { salesFile, salesHeader } from "./extracts";
import { cell, good, lines, utf8, withCells, type NastyFile } from "./nasty-files";

const [first, second] = [good("2026-06-01"), good("2026-06-08")];
const sales = salesFile(first, second);
const loads = (what: string, file: string | Buffer, more: Partial<NastyFile> = {}): NastyFile => ({ what, file, rows: [2, 2], issues: [], ...more });

/** What spreadsheets and till systems make of weeks and numbers. */
export const nastySpreadsheetCells: NastyFile[] = [
  ...["1-Jun-26", "Jun-26", "01.06.2026", "06/01/2026", "1/6/26", "2026/06/01", "20260601", "2026-6-1", "2026-06-01 00:00:00", "2026-06-01T00:00:00Z", "46174.0",
    "W23", "2026-W00", "2026-06-01;2026-06-07", "#########", "2026-06-31", "2025-02-29"].map((value) => cell("week", value, "bad-week")),
  ...['"1,234.50"', "1.234.50", '"1.234,50"', "1'234", "1\u00a0234", "1_234", "\u221212", "12-", "(12)", "\u0661\u0662", "\uff11\uff12", "12 pcs", "12%", "NULL", "\\N", "NaN",
    "#N/A", "#REF!", "-", "n/a", "1e", "1e400", "--3", "1e1000000", "12\u200b"].map((value) => cell("units", value, "not-a-number")),
  ...["$21.48", "21.48 EUR", "21,48-", "=SUM(A1:A2)", "+-2", "@21"].map((value) => cell("net_sales", value.includes(",") ? `"${value}"` : value, "not-a-number")),
  cell("units", "\u00a0", "missing-value"), cell("units", '" "', "missing-value"), cell("units", '"""12"""', "not-a-number"),
  cell("feature", "TRUE", "not-a-flag"), cell("feature", "x", "not-a-flag"), cell("feature", "1.0", "not-a-flag"), cell("display", "-1", "not-a-flag"),
  cell("mechanic", "2 for 1", "unknown-mechanic"), cell("open_days", "7.0", "not-days"), cell("promotion_days", "-1", "not-days"),
  cell("temperature_c", "-459.67", "temperature-out-of-range"), cell("temperature_c", "12\u00b0", "not-a-number"),
  cell("store", "S1\u200b", "unknown-store"), cell("store", "\u202eS1", "unknown-store"), cell("store", "__proto__", "unknown-store"), cell("store", "=S1", "unknown-store"),
  cell("product", "2.00E+12", "unknown-product"), cell("product", "constructor", "unknown-product"), cell("product", "00P1", "unknown-product"),
  cell("product", "'P1", "unknown-product"), cell("product", "../../P1", "unknown-product"), cell("product", "\u05de\u05d5\u05e6\u05e8", "unknown-product"),
];

/** Files that look odd and are right: every row of them loads. */
export const nastyButRight: NastyFile[] = [
  loads("a compressed file called .csv", gzipSync(sales)),
  loads("a plain file called .csv.gz", sales, { name: ["week 23.csv.gz", "week 23.csv.gz"] }),
  loads("a plain file called .xlsx", sales, { name: ["week 23.xlsx", "week 23.xlsx"] }),
  loads("a name that is a path upwards", sales, { name: ["../../etc/cron.d/sales.csv", "sales.csv"] }),
  loads("a name that is a drive's path", sales, { name: ["C:\\tills\\week 23.csv", "week 23.csv"] }),
  loads("a name that turns its ending round", sales, { name: ["sales\u202evsc.exe", "salesvsc.exe"] }),
  loads("a name in Arabic with an emoji", sales, { name: ["\u0645\u0628\u064a\u0639\u0627\u062a \ud83c\udf4e.csv", "\u0645\u0628\u064a\u0639\u0627\u062a \ud83c\udf4e.csv"] }),
  loads("a name that looks like SQL and HTML", sales, { name: ["'; drop table extracts; --<img src=x>.csv", "'; drop table extracts; --<img src=x>.csv"] }),
  loads("a compressed file in two members", Buffer.concat([gzipSync(`${salesHeader}\n${first}\n`), gzipSync(`${second}\n`)])),
  loads("a compressed file with a byte order mark inside", gzipSync(`\ufeff${sales}`)),
  loads("line ends of all three kinds", `${salesHeader}\r\n${first}\r${second}\n`),
  loads("blanks and no-break spaces around every value", sales.replace(/[^,\n]+/g, " $&\u00a0")),
  loads("the columns in another order", sales.split("\n").map((line) => line.split(",").reverse().join(",")).join("\n")),
  loads("quotes around the header alone", `${salesHeader.replace(/[^,]+/g, '"$&"')}\n${first}\n${second}`),
  loads("columns without name or values", sales.split("\n").map((line) => `${line},,`).join("\n"), { issues: ["1  unknown-column"] }),
  loads("a column that is not ours, twice", `${salesHeader},note,note\n${first},a,b\n${second},,`, { issues: ["1  unknown-column"] }),
  loads("columns called like parts of the language", `${salesHeader},__proto__,constructor\n${first},a,b\n${second},,`, { issues: ["1  unknown-column"] }),
  loads("a note with embedded line ends, quotes and commas", `${salesHeader},note\n${first},"one, ""two""\r\nthree"\n${second},\n`, { issues: ["1  unknown-column"] }),
  loads("a note that looks like a formula", `${salesHeader},note\n${first},"=HYPERLINK(""http://192.0.2.1"",""x"")"\n${second},@SUM(1)\n`, { issues: ["1  unknown-column"] }),
  loads("numbers with signs and without leading zeros", withCells({ units: "+12", net_sales: "+11.880", shelf_price: ".99", regular_price: "1." })),
  loads("events that mean something to COPY", withCells({ event: "\\." })),
  loads("an event of backslashes and an N", withCells({ event: "\\N" })),
  loads("an event that is a formula", withCells({ event: "=cmd|' /C calc'!A0" })),
  loads("an event of emoji", withCells({ event: "\ud83c\udf4e\ud83d\udc68\u200d\ud83d\udc69\u200d\ud83d\udc67" })),
  loads("mechanics in capitals", withCells({ mechanic: "MULTI_BUY" })),
  loads("a thousand columns", sales.split("\n").map((line, at) => line + Array.from({ length: 1_000 }, (_, column) => (at === 0 ? `,extra ${column}` : ",1")).join("")).join("\n"), { issues: ["1  unknown-column"] }),
  loads("store names from right to left, with emoji, formulas and COPY's end mark", lines("store,name,region", "R1,\u05d7\u05e0\u05d5\u05ea \ud83c\udfea,coast", "R2,=1+1,\\."), { kind: "stores" }),
  loads("stores whose codes are paths and tags", lines("store,name,region", "../R3,<script>alert(1)</script>,coast", "R4;--,@R4,coast"), { kind: "stores" }),
  loads("product names with quotes and line ends", lines("product,name,category", 'N1,"7"" plate",kitchen', 'N2,"soup\nof the day",kitchen'), { kind: "products", rows: [2, 1], issues: ["3 name control-character"] }),
];

/** Rows that a chain would doubt. */
export const nastyDoubted: NastyFile[] = [
  loads("a GTIN whose check digit is wrong", lines("product,name,category,gtin", "G1,Figs,fruit,2000000000016", "G2,Dates,fruit,"), { kind: "products", rows: [2, 1], issues: ["2 gtin gtin-check-digit"] }),
  loads("a price twenty times the product's usual one", salesFile(good("2026-05-04").replaceAll("1.79", "35.80").replace("21.48", "429.60"), good("2026-05-11")), { issues: ["3 shelf_price unusual-price"] }),
  loads("net sales far from units times price", salesFile(good("2026-05-04").replace("21.48", "2148"), good("2026-05-11")), { issues: ["2 net_sales net-sales-off"] }),
  loads("a week that has not begun", salesFile(good("2026-11-30"), good("2026-05-11")), { rows: [2, 1], issues: ["2 week week-in-future"] }),
  loads("sales before the store opened", salesFile(good("2014-01-06"), good("2026-05-11")), { rows: [2, 1], issues: ["2 week before-opening"] }),
  loads("weeks with a gap between them", salesFile(good("2026-02-02"), good("2026-05-11")), { issues: ["3 week missing-weeks"] }),
];

/** Files that are whole but no table, or one of another make. */
export const nastyTables: NastyFile[] = [
  { what: "a byte order mark alone", file: "\ufeff", unusable: ["no-header", /no lines/] },
  { what: "a line end alone", file: "\n", unusable: ["no-header", /no lines/] },
  { what: "two byte order marks", file: `\ufeff\ufeff${sales}`, rows: [2, 2], issues: [] },
  { what: "a header alone, compressed, with a mark", file: gzipSync(`\ufeff${salesHeader}\r\n`), unusable: ["no-rows", /no rows/] },
  { what: "a header and rows of commas", file: `${salesHeader}\n,,,,,,,,,\n,,,,,,,,,\n`, unusable: ["no-rows", /no rows/] },
  { what: "an error page of a web server", file: "<!doctype html>\n<html><body>502, Bad Gateway</body></html>\n", proposed: ["header-ambiguous", "lines-above-header", "no-separator"], unusable: ["layout-needed", /No column of the file is taken for week/] },
  { what: "JSON", file: '[{"week":"2026-06-01","store":"S1"}]\n', proposed: ["header-ambiguous"], unusable: ["layout-needed", /No column of the file is taken for product/] },
  { what: "an open quote in the header", file: `"${salesHeader}\n${first}\n`, proposed: [], unusable: ["no-header", /quotes do not close/] },
  { what: "a total below the rows", file: salesFile(first, second, "Total,,,24,42.96,,,,,"), rows: [3, 2], issues: ["4 product missing-value", "4 store missing-value", "4 week bad-week"] },
  { what: "a comment below the header", file: salesFile("# exported at night", first, second), rows: [3, 2], issues: ["2  ragged-row"] },
  { what: "the header again among the rows", file: salesFile(first, salesHeader, second), rows: [3, 2], issues: ["3 display not-a-flag", "3 feature not-a-flag", "3 mechanic unknown-mechanic", "3 net_sales not-a-number", "3 product unknown-product", "3 regular_price not-a-number", "3 shelf_price not-a-number", "3 store unknown-store", "3 units not-a-number", "3 week bad-week"] },
  { what: "two files one behind the other with a mark between", file: utf8(`${sales}\n`, `\ufeff${good("2026-05-25")}\n`), rows: [3, 3], issues: [] },
  { what: "an overlong zero", file: utf8(`${salesHeader}\n2026-06-08,S`, [0xc0, 0x80], ",P1,1,1,1,1,0,0,none\n"), proposed: ["encoding-guessed"], unusable: ["no-usable-row", /one row/] },
  { what: "quotes escaped by a backslash", file: salesFile(first, second.replace("S1", '"S\\"1"')), rows: [2, 1], issues: ["3  open-quote"] },
  { what: "a lone quote as the last byte", file: `${sales}\n"`, rows: [3, 2], issues: ["4  open-quote"] },
  { what: "a row of a hundred thousand fields", file: salesFile(first, "x,".repeat(100_000), second), rows: [3, 2], issues: ["3  ragged-row"] },
  { what: "a value of 10 MB in quotes", file: salesFile(first, second.replace("none", `"${"x".repeat(10 * 1024 ** 2)}"`)), rows: [2, 1], issues: ["3  open-quote"] },
  { what: "a gzip file that holds a gzip file", file: gzipSync(gzipSync(sales)), unusable: ["not-a-csv-file", /holds another compressed file/] },
  { what: "a gzip file's first ten bytes", file: gzipSync(sales).subarray(0, 10), unusable: ["broken-gzip", /ends early/] },
  { what: "a gzip file without its checksum", file: gzipSync(sales).subarray(0, -8), unusable: ["broken-gzip", /ends early/] },
  { what: "a gzip file with a wrong checksum", file: Buffer.concat([gzipSync(sales).subarray(0, -8), Buffer.alloc(8, 1)]), unusable: ["broken-gzip", /damaged/] },
  { what: "a gzip file with other bytes behind it", file: Buffer.concat([gzipSync(sales), Buffer.from("and more")]), unusable: ["broken-gzip", /damaged/] },
  { what: "a gzip file of nothing", file: gzipSync(""), unusable: ["no-header", /no lines/] },
  { what: "a file of products sent as stores", kind: "stores", file: lines("product,name,category", "P1,Oat bar,snacks"), proposed: [], unusable: ["layout-needed", /looks like a file of products/] },
];
