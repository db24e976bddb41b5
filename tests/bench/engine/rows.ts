import { readFileSync } from "node:fs";
import { join } from "node:path";

/** As reference.R writes them. */
const columns = ["logmove", "units", "price", "woy", "deal", "feat", "store", "brand"] as const;

/** Rows of the orange-juice data; stores and brands as text, since they are names. */
export type Rows = Record<"logmove" | "units" | "price" | "woy" | "deal" | "feat", Float64Array> & { store: string[]; brand: string[] };

export function readRows(folder: string): Rows {
  const bytes = readFileSync(join(folder, "rows.bin"));
  const count = bytes.byteLength / (8 * columns.length);
  const column = (name: (typeof columns)[number]) => {
    const start = bytes.byteOffset + 8 * count * columns.indexOf(name);
    return new Float64Array(bytes.buffer.slice(start, start + 8 * count));
  };
  const named = (name: "store" | "brand") => Array.from(column(name), String);
  return {
    logmove: column("logmove"), units: column("units"), price: column("price"), woy: column("woy"),
    deal: column("deal"), feat: column("feat"), store: named("store"), brand: named("brand"),
  };
}

/** The rows for which `keep` holds, in their order. */
export function rowsWhere(rows: Rows, keep: (row: number) => boolean): Rows {
  const positions = rows.store.map((_, row) => row).filter(keep);
  const numbers = (values: Float64Array) => Float64Array.from(positions, (row) => values[row]);
  return {
    logmove: numbers(rows.logmove), units: numbers(rows.units), price: numbers(rows.price), woy: numbers(rows.woy),
    deal: numbers(rows.deal), feat: numbers(rows.feat),
    store: positions.map((row) => rows.store[row]), brand: positions.map((row) => rows.brand[row]),
  };
}

/** One set of rows per store and brand, in the order of R's split: brand by brand, stores ascending in each. */
export function everySeries(rows: Rows): Rows[] {
  const positions = new Map<string, number[]>();
  rows.store.forEach((store, row) => {
    const key = `${rows.brand[row].padStart(4, "0")} ${store.padStart(4, "0")}`;
    const own = positions.get(key);
    if (own) own.push(row);
    else positions.set(key, [row]);
  });
  const keys = [...positions.keys()].sort();
  return keys.map((key) => {
    const own = new Set(positions.get(key));
    return rowsWhere(rows, (row) => own.has(row));
  });
}
