import { mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import Papa from "papaparse";
import type { Demo } from "./types";

type Cell = string | number | null;
type Table = { headings: string[]; rows: Cell[][] };

const flag = (value: boolean) => (value ? 1 : 0);
const money = (value: number) => value.toFixed(2);

/** The chain's files by name, as text: CSV after RFC 4180 with a header row. */
export function demoFiles(demo: Demo): Record<string, string> {
  return {
    "stores.csv": toCsv({
      headings: ["store", "name", "region", "opened", "closed"],
      rows: demo.stores.map((row) => [row.store, row.name, row.region, row.opened, row.closed]),
    }),
    "products.csv": toCsv(productTable(demo)),
    "listings.csv": toCsv({
      headings: ["product", "store", "first_day", "last_day"],
      rows: demo.listings.map((row) => [row.product, row.store, row.firstDay, row.lastDay]),
    }),
    "funding.csv": toCsv({
      headings: ["product", "first_day", "last_day", "per_unit", "lump_sum"],
      rows: demo.funding.map((row) => [row.product, row.firstDay, row.lastDay, money(row.perUnit), money(row.lumpSum)]),
    }),
    "events.csv": toCsv({
      headings: ["event", "name", "first_day", "last_day", "region"],
      rows: demo.events.map((row) => [row.event, row.name, row.firstDay, row.lastDay, row.region]),
    }),
    "temperatures.csv": toCsv({
      headings: ["week", "region", "temperature_c"],
      rows: demo.temperatures.map((row) => [row.week, row.region, row.temperatureC.toFixed(1)]),
    }),
    "sales.csv": toCsv(salesTable(demo)),
  };
}

/**
 * Writes the chain's files into a folder, which is made where missing; files of the same name are replaced.
 *
 * @param options.gzipSales write `sales.csv.gz` instead of `sales.csv`
 * @returns the paths written
 */
export async function writeDemo(
  { demo, folder, gzipSales = false }: { demo: Demo; folder: string; gzipSales?: boolean },
): Promise<string[]> {
  await mkdir(folder, { recursive: true });
  return Promise.all(
    Object.entries(demoFiles(demo)).map(async ([name, text]) => {
      const zipped = gzipSales && name === "sales.csv";
      const path = join(folder, zipped ? `${name}.gz` : name);
      await writeFile(path, zipped ? gzipSync(text) : text);
      return path;
    }),
  );
}

function toCsv({ headings, rows }: Table): string {
  return `${Papa.unparse([headings, ...rows], { newline: "\r\n" })}\r\n`;
}

function productTable({ products }: Demo): Table {
  return {
    headings: [
      "product", "name", "gtin", "brand", "category", "sold_by_weight",
      "valid_from", "unit_cost", "regular_price", "tax_rate",
    ],
    rows: products.map((row) => [
      row.product, row.name, row.gtin, row.brand, row.category, flag(row.soldByWeight),
      row.validFrom, money(row.unitCost), money(row.regularPrice), row.taxRate.toFixed(2),
    ]),
  };
}

function salesTable({ sales }: Demo): Table {
  return {
    headings: [
      "week", "store", "product", "units", "net_sales",
      "regular_price", "shelf_price", "feature", "display", "mechanic",
    ],
    rows: sales.map((row) => [
      row.week, row.store, row.product, row.units, money(row.netSales),
      money(row.regularPrice), money(row.shelfPrice), flag(row.feature), flag(row.display), row.mechanic,
    ]),
  };
}
