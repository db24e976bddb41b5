import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout } from "@shared/contract/layouts";
import { bytesIn } from "./bytes-in";

type Format = Partial<Pick<Layout, "encoding" | "separator" | "linesAbove" | "hasHeader" | "decimal" | "thousands" | "dateOrder" | "weekDay" | "tax">>;

export type SampleHead = {
  title: string;
  kind?: ExtractKind;
  head: Uint8Array;
  /** What differs from UTF-8, commas, a header, decimal points, no thousands, days that begin with the year, first days of weeks, tax included. */
  layout: Format;
  /** Our column -> their name, or position. */
  mapping: Record<string, string | number>;
  /** Codes of all warnings. */
  warnings?: string[];
};

const utf8 = (text: string) => bytesIn("utf-8", text);
const lines = (...rows: string[]) => utf8(`${rows.join("\n")}\n`);

const ourNames = { week: "week", store: "store", product: "product", units: "units", net_sales: "net_sales", regular_price: "regular_price" };
const ourHeader = "week,store,product,units,net_sales,regular_price";
const ourRows = ["2026-06-08,S1,P1,12,23.88,1.99", "2026-06-15,S1,P1,9,17.91,1.99", "2026-06-22,S2,P1,30,59.70,1.99"];
const our = [ourHeader, ...ourRows].join("\n");

const german = "Woche;Filiale;Artikelnummer;Absatz;Umsatz;Normalpreis";
const germanNames = { week: "Woche", store: "Filiale", product: "Artikelnummer", units: "Absatz", net_sales: "Umsatz", regular_price: "Normalpreis" };
const germanRows = ["08.06.2026;0012;4711;1.234;2.456,66;1,99", "15.06.2026;0012;4711;990;1.970,10;1,99"];
const germanFormat: Format = { separator: ";", decimal: ",", thousands: ".", dateOrder: "dmy" };

const writing: SampleHead[] = [
  { title: "our own extract", head: utf8(our), layout: {}, mapping: ourNames },
  { title: "a byte order mark", head: bytesIn("utf-8", our, { mark: true }), layout: {}, mapping: ourNames },
  { title: "UTF-16 with a mark, little end first", head: bytesIn("utf-16le", our, { mark: true }), layout: { encoding: "utf-16le" }, mapping: ourNames },
  { title: "UTF-16 with a mark, big end first", head: bytesIn("utf-16be", our, { mark: true }), layout: { encoding: "utf-16be" }, mapping: ourNames },
  { title: "UTF-16 without a mark, little end first", head: bytesIn("utf-16le", our), layout: { encoding: "utf-16le" }, mapping: ourNames },
  { title: "UTF-16 without a mark, big end first", head: bytesIn("utf-16be", our), layout: { encoding: "utf-16be" }, mapping: ourNames },
  {
    title: "Windows-1252 with umlauts and a euro sign",
    head: bytesIn("windows-1252", "Woche;Filiale;Artikel;Stück;Umsatz;Normalpreis\n08.06.2026;Köln;P1;3;5,97 €;1,99 €\n15.06.2026;Köln;P1;4;7,96 €;1,99 €\n"),
    layout: { encoding: "windows-1252", separator: ";", decimal: ",", dateOrder: "dmy" },
    mapping: { ...germanNames, product: "Artikel", units: "Stück" }, warnings: ["encoding-guessed"],
  },
  { title: "carriage returns and line feeds", head: utf8(our.replaceAll("\n", "\r\n")), layout: {}, mapping: ourNames },
  { title: "carriage returns alone", head: utf8(our.replaceAll("\n", "\r")), layout: {}, mapping: ourNames },
  { title: "tabs", head: utf8(our.replaceAll(",", "\t")), layout: { separator: "\t" }, mapping: ourNames },
  { title: "bars", head: utf8(our.replaceAll(",", "|")), layout: { separator: "|" }, mapping: ourNames },
  { title: "semicolons with decimal points", head: utf8(our.replaceAll(",", ";")), layout: { separator: ";" }, mapping: ourNames },
  {
    title: "quoted fields with separators, quotes and line ends in them", kind: "stores",
    head: lines("store,name,region", 'S1,"High Street, 5",Coast', 'S2,"The ""Old"" Mill\nMarket",Moor', "S3,Plain,Town"),
    layout: {}, mapping: { store: "store", name: "name", region: "region" },
  },
  {
    title: "every field in quotes", head: utf8(our.split("\n").map((row) => row.split(",").map((field) => `"${field}"`).join(",")).join("\n")),
    layout: {}, mapping: ourNames,
  },
  { title: "a lone quote in a line", head: lines(ourHeader, ...ourRows, '2026-06-22,"S3,P1,1,1.99,1.99', "2026-06-22,S4,P1,1,1.99,1.99"), layout: {}, mapping: ourNames },
  {
    title: "a first line that names the separator", head: utf8(`sep=;\r\n${our.replaceAll(",", ";")}`),
    layout: { separator: ";" }, mapping: ourNames, warnings: ["separator-line"],
  },
  {
    title: "rows of another width", head: lines(ourHeader, ...ourRows, "2026-06-29,S1,P1,12,23.88", "2026-06-29,S2,P1"),
    layout: {}, mapping: ourNames, warnings: ["ragged-rows"],
  },
  { title: "a header only", head: utf8(ourHeader), layout: {}, mapping: ourNames },
];

const numbers: SampleHead[] = [
  { title: "German numbers and dates", head: lines(german, ...germanRows), layout: germanFormat, mapping: germanNames },
  {
    title: "decimal commas in a list separated by commas",
    head: lines(ourHeader, '2026-06-08,S1,P1,12,"23,88","1,99"', '2026-06-15,S1,P1,9,"17,91","1,99"'), layout: { decimal: "," }, mapping: ourNames,
  },
  {
    title: "1,234.56 in quotes", head: lines(ourHeader, '2026-06-08,S1,P1,"1,200","2,388.00",1.99', "2026-06-15,S1,P1,9,17.91,1.99"),
    layout: { thousands: "," }, mapping: ourNames,
  },
  {
    title: "thousands by narrow blanks", head: lines(german, "08.06.2026;12;4711;1\u202f234;2\u202f456,66;1,99", "15.06.2026;12;4711;990;1\u202f970,10;1,99"),
    layout: { ...germanFormat, thousands: " " }, mapping: germanNames,
  },
  {
    title: "thousands by apostrophes, as in Switzerland", head: lines(german, "08.06.2026;12;4711;1’234;2’456.65;1.99", "15.06.2026;12;4711;990;1'970.10;1.99"),
    layout: { separator: ";", thousands: "'", dateOrder: "dmy" }, mapping: germanNames,
  },
  {
    title: "decimal commas without a header, as regular by commas as by semicolons",
    head: lines("2026-06-08;S1;P1;3,5;6,97;1,99", "2026-06-15;S1;P1;2,5;4,98;1,99", "2026-06-22;S2;P2;1,5;4,49;2,99"),
    layout: { separator: ";", hasHeader: false, decimal: "," }, mapping: { week: 0, store: 1, product: 2, units: 3, net_sales: 4, regular_price: 5 },
  },
  {
    title: "three digits behind every comma of a list with semicolons", kind: "temperatures",
    head: lines("week;region;temperature", "2026-06-08;Coast;14,125", "2026-06-15;Coast;15,250"),
    layout: { separator: ";", decimal: "," }, mapping: { week: "week", region: "region", temperature_c: "temperature" }, warnings: ["numbers-ambiguous"],
  },
  {
    title: "a zero before the mark that tells decimals", kind: "temperatures",
    head: lines("week;region;temperature", "2026-06-08;Coast;14.125", "2026-06-15;Coast;0.250"),
    layout: { separator: ";" }, mapping: { week: "week", region: "region", temperature_c: "temperature" },
  },
  {
    title: "minus signs in front and behind", head: lines(german, "08.06.2026;12;4711;-3;5,97-;1,99", "15.06.2026;12;4711;990;1970,10;1,99"),
    layout: { separator: ";", decimal: ",", dateOrder: "dmy" }, mapping: germanNames,
  },
  {
    title: "whole numbers alone in a list with semicolons", head: lines("week;store;product;units;sales;price", "2026-06-08;1;2;3;6;2", "2026-06-15;1;2;4;8;2"),
    layout: { separator: ";", decimal: "," }, mapping: { week: "week", store: "store", product: "product", units: "units", net_sales: "sales", shelf_price: "price" }, warnings: ["column-not-found"],
  },
];

const salesIn = (...weeks: string[]) => lines(ourHeader, ...weeks.map((week, at) => `${week},S1,P1,${at + 1},${(at + 1) * 2}.50,2.50`));
const sales = (header: string, ...weeks: string[]) => lines(header, ...weeks.map((week, at) => `${week},S1,P1,${at + 1},${(at + 1) * 2}.50,2.50`));

const days: SampleHead[] = [
  { title: "13/06/2026", head: salesIn("13/06/2026", "06/06/2026"), layout: { dateOrder: "dmy", weekDay: "last" }, mapping: ourNames },
  { title: "6/13/2026", head: salesIn("6/13/2026", "6/6/2026"), layout: { dateOrder: "mdy", weekDay: "last" }, mapping: ourNames },
  // 8 June and 6 July 2026 are Mondays; 6 August and 7 June are a Thursday and a Sunday.
  { title: "days that only make weeks when the day comes first", head: salesIn("08/06/2026", "06/07/2026"), layout: { dateOrder: "dmy" }, mapping: ourNames },
  { title: "days that only make weeks when the month comes first", head: salesIn("06/08/2026", "07/06/2026", "06/01/2026"), layout: { dateOrder: "mdy" }, mapping: ourNames },
  {
    title: "a single day that can be two", head: salesIn("08/06/2026"), layout: { dateOrder: "dmy" }, mapping: ourNames, warnings: ["dates-ambiguous"],
  },
  { title: "dots, which no month-first writing has", head: salesIn("08.06.2026"), layout: { dateOrder: "dmy" }, mapping: ourNames },
  { title: "years of two digits", head: salesIn("15/06/26", "22/06/26"), layout: { dateOrder: "dmy" }, mapping: ourNames },
  { title: "compact dates", head: salesIn("20260608", "20260615"), layout: {}, mapping: ourNames },
  { title: "ISO weeks", head: salesIn("2026-W24", "2026-W25"), layout: {}, mapping: ourNames },
  { title: "years and weeks in one number, where the name says week", head: salesIn("202624", "202625"), layout: {}, mapping: ourNames },
  { title: "times behind the dates", head: salesIn("2026-06-08T00:00:00Z", "2026-06-15T00:00:00Z"), layout: {}, mapping: ourNames },
  { title: "names of months", head: salesIn("8 Jun 2026", "15 Jun 2026"), layout: {}, mapping: ourNames },
  { title: "day numbers of a spreadsheet", head: salesIn("46181", "46188"), layout: {}, mapping: ourNames, warnings: ["serial-days"] },
  {
    title: "weeks by their last day, so named", head: sales("Week Ending,Store,Item,Units,Net Sales,Regular Price", "2026-06-14", "2026-06-21"),
    layout: { weekDay: "last" },
    mapping: { week: "Week Ending", store: "Store", product: "Item", units: "Units", net_sales: "Net Sales", regular_price: "Regular Price" },
  },
  { title: "Sundays", head: salesIn("2026-06-14", "2026-06-21"), layout: { weekDay: "last" }, mapping: ourNames, warnings: ["week-day-ambiguous"] },
  { title: "Sundays that are named as first days", head: sales(ourHeader.replace("week", "week starting"), "2026-06-14", "2026-06-21"), layout: {}, mapping: { ...ourNames, week: "week starting" } },
  { title: "days, not weeks", head: salesIn("2026-06-08", "2026-06-09", "2026-06-10"), layout: {}, mapping: ourNames, warnings: ["not-weekly"] },
  { title: "one wrong day among weeks", head: salesIn("2026-06-01", "2026-06-08", "2026-06-15", "2026-06-22", "2026-06-30"), layout: {}, mapping: ourNames },
  { title: "one date in another order", head: salesIn("13/06/2026", "20/06/2026", "06/27/2026"), layout: { dateOrder: "dmy", weekDay: "last" }, mapping: ourNames, warnings: ["dates-mixed"] },
];

const names: SampleHead[] = [
  {
    title: "French names", head: lines("Semaine;Magasin;Code produit;Quantité;CA HT;Prix normal;Tête de gondole", "08/06/2026;12;A7;3;5,97;1,99;oui", "15/06/2026;12;A7;4;7,96;1,99;non"),
    layout: { separator: ";", decimal: ",", dateOrder: "dmy", tax: "excluded" },
    mapping: { week: "Semaine", store: "Magasin", product: "Code produit", units: "Quantité", net_sales: "CA HT", regular_price: "Prix normal", display: "Tête de gondole" },
    warnings: ["tax-guessed"],
  },
  {
    title: "Spanish names", head: lines("Semana;Tienda;Artículo;Unidades;Ventas;Precio habitual;Folleto;Días sin stock", "08/06/2026;12;A7;3;5,97;1,99;sí;0", "15/06/2026;12;A7;4;7,96;1,99;no;2"),
    layout: { separator: ";", decimal: ",", dateOrder: "dmy" },
    mapping: { week: "Semana", store: "Tienda", product: "Artículo", units: "Unidades", net_sales: "Ventas", regular_price: "Precio habitual", feature: "Folleto", stock_out_days: "Días sin stock" },
  },
  {
    title: "Dutch names", head: lines("Week;Filiaal;Artikelcode;Aantal;Omzet;Adviesprijs;Schapprijs;Actie", "2026-W24;12;A7;3;5,97;1,99;1,99;geen", "2026-W25;12;A7;4;7,96;1,99;1,99;Folder"),
    layout: { separator: ";", decimal: "," },
    mapping: { week: "Week", store: "Filiaal", product: "Artikelcode", units: "Aantal", net_sales: "Omzet", regular_price: "Adviesprijs", shelf_price: "Schapprijs", promotion: "Actie" },
  },
  {
    title: "names run together, and a column that is nobody's", head: lines("WeekStart,StoreID,ItemNumber,UnitSales,NetSales,ListPrice,Buyer", "2026-06-08,1,A7,3,5.97,1.99,Kim", "2026-06-15,1,A7,4,7.96,1.99,Kim"),
    layout: {}, mapping: { week: "WeekStart", store: "StoreID", product: "ItemNumber", units: "UnitSales", net_sales: "NetSales", regular_price: "ListPrice" },
  },
  {
    title: "names with more in them", head: lines("Sales week (Mon),Our store code,Main article number,Units sold (net),Net sales EUR,Regular price EUR", "2026-06-08,1,A7,3,5.97,1.99", "2026-06-15,1,A7,4,7.96,1.99"),
    layout: {},
    mapping: { week: "Sales week (Mon)", store: "Our store code", product: "Main article number", units: "Units sold (net)", net_sales: "Net sales EUR", regular_price: "Regular price EUR" },
  },
  {
    title: "Arabic, Hebrew and emoji names", kind: "stores", head: lines("store,name,region", "S1,متجر المدينة,ساحل", "S2,חנות העיר,חוף", "S3,🍎 Corner 👩‍🌾,Moor"),
    layout: {}, mapping: { store: "store", name: "name", region: "region" },
  },
  {
    title: "Arabic headers, of which only values tell", kind: "sales",
    head: lines("أسبوع,متجر,باركود,كمية,مبيعات,سعر", "2026-06-08,S1,4006381333931,3,5.97,1.99", "2026-06-15,S1,4006381333931,4,11.96,2.99", "2026-06-22,S1,96385074,2,3.98,1.99"),
    layout: {}, mapping: { week: "أسبوع", product: "باركود", units: "كمية", net_sales: "مبيعات", regular_price: "سعر" }, warnings: ["column-not-found"],
  },
  {
    title: "no header: weeks, codes, GTINs, the numbers of a sale and flags",
    head: lines("2026-06-08,17,4006381333931,3,1.99,5.97,1,0", "2026-06-15,17,4006381333931,4,2.99,11.96,0,0", "2026-06-22,18,96385074,2,1.99,3.98,0,1"),
    layout: { hasHeader: false }, mapping: { week: 0, store: 1, product: 2, units: 3, regular_price: 4, net_sales: 5, feature: 6, display: 7 },
  },
  {
    title: "no header and no GTINs: codes by their place, and a sale at one price",
    head: lines("101;7001;2026-06-08;12;23,88;1,99", "101;7002;2026-06-08;9;17,91;1,99", "102;7001;2026-06-08;30;59,70;1,99"),
    layout: { separator: ";", hasHeader: false, decimal: "," }, mapping: { store: 0, product: 1, week: 2, units: 3, net_sales: 4, regular_price: 5 },
  },
  {
    title: "no header, and the price before the units",
    head: lines("2026-06-08,S1,P1,1.99,12,23.88", "2026-06-15,S1,P1,2.49,9,22.41", "2026-06-22,S2,P1,2.99,30,89.70"),
    layout: { hasHeader: false }, mapping: { week: 0, store: 1, product: 2, regular_price: 3, units: 4, net_sales: 5 },
  },
  {
    title: "no header, and a spreadsheet's day numbers", head: lines("S1,P1,46181,12,1.99,23.88", "S1,P1,46188,9,2.49,22.41", "S2,P1,46195,30,2.99,89.70"),
    layout: { hasHeader: false }, mapping: { store: 0, product: 1, week: 2, units: 3, regular_price: 4, net_sales: 5 }, warnings: ["serial-days"],
  },
  {
    title: "no header, and words alone, of which one comes again", kind: "stores", head: lines("S1,High Street,Coast", "S2,Mill,Coast", "S3,Market,Moor"),
    layout: { hasHeader: false }, mapping: { store: 0 }, warnings: ["column-not-found", "column-not-found"],
  },
  {
    title: "two columns of one name", head: lines("week,store,product,units,units,net_sales,regular_price", "2026-06-08,S1,P1,3,4,5.97,1.99", "2026-06-15,S1,P1,4,5,7.96,1.99"),
    layout: {}, mapping: { ...ourNames, units: 3 }, warnings: ["repeated-name", "values-do-not-fit"],
  },
  {
    title: "a column without a name", head: lines("week,store,,units,net_sales,regular_price", "2026-06-08,S1,4006381333931,3,5.97,1.99", "2026-06-15,S1,96385074,4,7.96,1.99"),
    layout: {}, mapping: { ...ourNames, product: 2 },
  },
  {
    title: "a name of ours over other values", head: lines("week,store,product,units,net_sales,regular_price,feature", "2026-06-08,S1,P1,3,5.97,1.99,blue", "2026-06-15,S1,P1,4,7.96,1.99,red"),
    layout: {}, mapping: ourNames, warnings: ["values-do-not-fit"],
  },
  {
    title: "codes that a spreadsheet shortened", head: lines(ourHeader, "2026-06-08,S1,4.00638E+12,3,5.97,1.99", "2026-06-15,S1,4.00638E+12,4,7.96,1.99"),
    layout: {}, mapping: ourNames, warnings: ["shortened-codes"],
  },
  {
    title: "a title above the header", head: lines("Sales report", ourHeader, ...ourRows),
    layout: { linesAbove: 1 }, mapping: ourNames, warnings: ["lines-above-header"],
  },
  { title: "empty fields behind the last column", head: lines(ourHeader, ...ourRows.map((row) => `${row},,`)), layout: {}, mapping: ourNames, warnings: ["ragged-rows"] },
  {
    title: "a first row of another width, without a header", kind: "temperatures",
    head: lines("2026-06-01,14.5,", ...Array.from({ length: 11 }, (_, at) => `2026-06-${String(1 + 7 * (at % 4)).padStart(2, "0")},${at}.5`)),
    layout: { hasHeader: false }, mapping: { week: 0, temperature_c: 1 }, warnings: ["ragged-rows"],
  },
  {
    title: "a number of the week beside its date", head: lines(`week,date,${ourHeader.slice(5)}`, ...ourRows.map((row, at) => `${24 + at},${row}`)),
    layout: {}, mapping: { ...ourNames, week: "date" }, warnings: ["values-do-not-fit"],
  },
  {
    title: "a surer name behind one that only has the word in it", kind: "stores", head: lines("Shop region,Region,Name,Store", "x,Coast,High Street,S1", "y,Moor,Mill,S2"),
    layout: {}, mapping: { region: "Region", name: "Name", store: "Store" },
  },
  {
    title: "names that share their words", head: lines("Week,Shop,SKU,Sales Volume,Value Sales,Regular Unit Price,Net Sales Price,Promo Days,Unit Cost", "2026-06-08,1,A7,3,5.97,1.99,1.99,0,0.80", "2026-06-15,1,A7,4,7.96,1.99,1.99,7,0.80"),
    layout: {},
    mapping: {
      week: "Week", store: "Shop", product: "SKU", units: "Sales Volume", net_sales: "Value Sales", regular_price: "Regular Unit Price", shelf_price: "Net Sales Price",
      promotion_days: "Promo Days", unit_cost: "Unit Cost",
    },
  },
  {
    title: "a column for each week", head: lines("store,product,2026-06-08,2026-06-15,2026-06-22", "S1,P1,3,4,5", "S1,P2,6,7,8"),
    layout: {}, mapping: { store: "store", product: "product" }, warnings: ["column-not-found", "column-not-found", "column-not-found", "column-not-found", "weeks-across"],
  },
  { title: "a single column", kind: "stores", head: lines("store", "S1", "S2"), layout: {}, mapping: { store: "store" }, warnings: ["column-not-found", "column-not-found", "no-separator"] },
];

const kinds: SampleHead[] = [
  {
    title: "products with a GTIN, a tax in percent and a price", kind: "products",
    head: lines("EAN;Artikelnummer;Bezeichnung;Marke;Warengruppe;MwSt;VK-Preis;EK", "4006381333931;A7;Tee;Halden;Heißes;7 %;1,99;0,80", "96385074;A8;Kaffee;Halden;Heißes;19 %;4,99;2,10"),
    layout: { separator: ";", decimal: "," },
    mapping: { product: "Artikelnummer", name: "Bezeichnung", gtin: "EAN", brand: "Marke", category: "Warengruppe", tax_rate: "MwSt", regular_price: "VK-Preis", unit_cost: "EK" },
  },
  {
    title: "events", kind: "events", head: lines("Event code,Description,Start date,End date", "FAIR,Harbour fair,13/06/2026,14/06/2026"),
    layout: { dateOrder: "dmy" }, mapping: { event: "Event code", name: "Description", first_day: "Start date", last_day: "End date" },
  },
  {
    title: "temperatures without a header", kind: "temperatures", head: lines("2026-06-08,14.5", "2026-06-15,-2.5"),
    layout: { hasHeader: false }, mapping: { week: 0, temperature_c: 1 },
  },
];

/** Heads of files as they come, written for this table. */
export const sampleHeads: readonly SampleHead[] = [...writing, ...numbers, ...days, ...names, ...kinds];
