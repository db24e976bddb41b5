import { salesFile, salesHeader } from "./extracts";
import { good, utf8, type NastyFile } from "./nasty-files";

const [first, second] = [good("2026-06-01"), good("2026-06-08")];
const sales = salesFile(first, second);
const lines = (...rows: string[]) => `${rows.join("\n")}\n`;
const swapped = (text: string) => Buffer.from(text, "utf16le").swap16();

/** A whole file in another form: its rows are all usable, and it waits until a person has confirmed how it is read. */
const foreign = (what: string, file: string | Buffer, proposed: string[] = [], more: Partial<NastyFile> = {}): NastyFile =>
  ({ what, file, proposed, rows: [2, 2], issues: [], ...more });

const german = "Woche;Filiale;Artikel;Menge;Umsatz;Normalpreis";
const germanRows = (...weeks: string[]) => weeks.map((week, at) => `${week};S1;P${at + 1};1.234,5;2.209,76;1,79`);
const ourNames = "week;store;product;units;net_sales;regular_price";
const dated = (...weeks: string[]) => lines(ourNames, ...weeks.map((week, at) => `${week};S1;P${(at % 2) + 1};12;21.48;1.79`));
const bare = ["2026-05-18", "2026-05-25", "2026-06-01"].flatMap((week, at) =>
  ["S1", "S2"].map((store, place) => `${week}|${store}|P1|${12 + at + place}|${((12 + at + place) * 1.79).toFixed(2)}|1.79`));

/** Files in forms of other systems, as a detected layout reads them. */
export const nastyInLayouts: NastyFile[] = [
  foreign("UTF-16", Buffer.from(`\ufeff${sales}`, "utf16le")),
  foreign("UTF-16 with the higher byte first", swapped(`\ufeff${sales}`)),
  foreign("UTF-16 without a byte order mark", Buffer.from(sales, "utf16le")),
  foreign("UTF-16 with the higher byte first, without a mark", swapped(sales)),
  { what: "UTF-16 that ends within a character", file: Buffer.from(`\ufeff${sales}`, "utf16le").subarray(0, -1), unusable: ["not-utf-16", /line 3/], proposed: [] },
  foreign("a Windows-1252 letter in line 3", utf8(`${salesHeader}\n${first}\n2026-06-08,Caf`, [0xe9], ",P1,1,1,1,1,0,0,none\n"), ["encoding-guessed"], { rows: [2, 1], issues: ["3 store unknown-store"] }),
  foreign("half a surrogate as bytes", utf8(`${salesHeader}\n${first}\n2026-06-08,S`, [0xed, 0xa0, 0x80], ",P1,1,1,1,1,0,0,none\n"), ["encoding-guessed"], { rows: [2, 1], issues: ["3 store unknown-store"] }),
  foreign("semicolons between columns", sales.replaceAll(",", ";")),
  foreign("tabs between columns", sales.replaceAll(",", "\t")),
  foreign("bars between columns", sales.replaceAll(",", "|")),
  foreign("semicolons, decimal commas, thousands by points and days before months", lines(german, ...germanRows("25.05.2026", "01.06.2026"))),
  foreign("thousands by commas between tabs", lines(ourNames.replaceAll(";", "\t"), "2026-06-01\tS1\tP1\t1,234\t2,208.86\t1.79", "2026-06-08\tS1\tP1\t12\t21.48\t1.79")),
  foreign("thousands by commas in quotes under our names", lines(salesHeader, ...["2026-06-01", "2026-06-08"].map((week) => `${week},S1,P1,"1,234","2,208.86",1.79,1.79,0,0,none`))),
  foreign("days before months", dated("25/05/2026", "01/06/2026")),
  foreign("months before days", dated("05/25/2026", "06/01/2026")),
  foreign("days before months under our own names", salesFile(good("25/05/2026"), good("01/06/2026"))),
  foreign("one date that may be of January or June", dated("01/06/2026", "01/06/2026"), ["dates-ambiguous"]),
  foreign("one date that the chain's weeks make one of June", dated("06/01/2026", "06/01/2026"), ["dates-ambiguous"]),
  foreign("years of two digits", dated("25.05.26", "01.06.26")),
  foreign("weeks by their last days", dated("2026-05-31", "2026-06-07")),
  { what: "spreadsheet day numbers in another system's file", file: lines(german, ...germanRows("46167", "46174")), unusable: ["no-usable-row", /Each of the 2 rows/], proposed: ["serial-days"], issues: ["2 Woche (week) unreadable-day", "3 Woche (week) unreadable-day"] },
  foreign("a line that names the separator above the header", `sep=;\n${sales.replaceAll(",", ";")}`, ["separator-line"]),
  { what: "a line that names our own separator", file: `sep=,\n${salesFile(first, second.replace("12", "x"))}`, rows: [2, 1], issues: ["4 units not-a-number"] },
  foreign("a title above the header", `Sales by week,,,,,,,,,\n${sales}`, ["lines-above-header"]),
  foreign("a title, a date and a blank line above the header", `Sales by week\nMade on;2026-06-10\n\n${sales.replaceAll(",", ";")}`, ["lines-above-header"]),
  foreign("rows without a header", lines(...bare), [], { rows: [6, 6] }),
  foreign("a header with units twice", `${salesHeader},Units\n${first},3\n${second},3`, ["repeated-name", "values-do-not-fit"]),
  foreign("a header with a column twice but for case and blanks", `${salesHeader}, UNITS \n${first},3\n${second},3`, ["repeated-name", "values-do-not-fit"]),
  foreign("one word for the whole promotion", lines(`${german};Aktion`, "25.05.2026;S1;P1;12;21,48;1,79;Handzettel", "01.06.2026;S1;P1;12;21,48;1,79;Mehrfachkauf")),
  { what: "a promotion word that nobody knows", file: lines(`${german};Aktion`, "25.05.2026;S1;P1;12;21,48;1,79;Handzettel", "01.06.2026;S1;P1;12;21,48;1,79;Glücksrad"), proposed: [], rows: [2, 1], issues: ["3 Aktion (feature) unreadable-word"] },
  { what: "values in another system's file that cannot be", file: lines(german, "25.05.2026;S9;P1;1,5;2,69;1,79", "32.05.2026;S1;P1;1,5;2,69;1,79", "01.06.2026;S1;P1;1.5;2,69;-1", "08.06.2026;S1;P1;1,5;2,69;1,79", "11.05.2026;S1;P1;1,5;2,69;1,79"), proposed: ["dates-mixed"], rows: [5, 2], issues: ["2 Filiale (store) unknown-store", "3 Woche (week) unreadable-day", "4 Menge (units) unreadable-number", "4 Normalpreis (regular_price) negative-amount", "5 Woche (week) missing-weeks"] },
  { what: "a ragged row between semicolons", file: lines(german, ...germanRows("25.05.2026", "01.06.2026"), "08.06.2026;S1"), proposed: ["ragged-rows"], rows: [3, 2], issues: ["4  ragged-row"] },
  { what: "right-to-left names", file: lines("\u05e9\u05d1\u05d5\u05e2;\u05d7\u05e0\u05d5\u05ea;\u05de\u05d5\u05e6\u05e8", "2026-06-01;S1;P1", "2026-06-08;S1;P1"), proposed: [], unusable: ["layout-needed", /\u05d7\u05e0\u05d5\u05ea.*need not be uploaded again/] },
  { what: "names of emoji alone", file: lines("\ud83d\udcc5,\ud83c\udfea,\ud83c\udf4e", "2026-06-01,S1,P1", "2026-06-08,S1,P1"), proposed: [], unusable: ["layout-needed", /\ud83c\udfea/] },
  { what: "a column for each week", file: lines("store;product;2026-05-18;2026-05-25;2026-06-01", "S1;P1;12;13;14"), proposed: ["weeks-across"], unusable: ["layout-needed", /a column for each week/] },
  { what: "a header without units and net sales", file: "week,store,product,regular_price\n2026-06-01,S1,P1,1.79", proposed: [], unusable: ["layout-needed", /taken for units and net_sales, which a sales file needs/] },
  { what: "two rows without a header", file: `${first}\n${second}\n`, proposed: [], unusable: ["layout-needed", /first line seems to be a row/] },
];
