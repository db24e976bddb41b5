import { commonestPrice, modelledPrice } from "@shared/planning";

/** What a file says of a product's week in a store. */
export type SaidRow = { week: string; store: string; units: number; netSales: number };
type KeptRow = SaidRow & { file: string };
type Load = { file: string; replaced: Map<string, KeptRow>; added: Set<string>; confirmedOf: Set<string>; isLoaded: boolean };

const keyOf = ({ week, store }: Pick<SaidRow, "week" | "store">) => `${week} ${store}`;
const isSame = (a: SaidRow, b: SaidRow) => a.units === b.units && a.netSales === b.netSales;

/** Sales of one product as a plain table in memory, with loads and withdrawals by their rules. */
export class ModelledSales {
  readonly #rows = new Map<string, KeptRow>();
  readonly #loads: Load[] = [];

  load(file: string, rows: readonly SaidRow[]): void {
    const load: Load = { file, replaced: new Map(), added: new Set(), confirmedOf: new Set(), isLoaded: true };
    for (const row of rows) {
      const kept = this.#rows.get(keyOf(row));
      if (kept && isSame(kept, row)) {
        load.confirmedOf.add(kept.file);
        continue;
      }
      if (kept) load.replaced.set(keyOf(row), kept);
      else load.added.add(keyOf(row));
      this.#rows.set(keyOf(row), { ...row, file });
    }
    this.#loads.push(load);
  }

  /** Files that are loaded, the oldest first. */
  get loaded(): string[] {
    return this.#loads.filter(({ isLoaded }) => isLoaded).map(({ file }) => file);
  }

  /** Whether a later load, still there, holds rows of this file too. */
  isTouchedLater(file: string): boolean {
    return this.#loads.some((load) => load.isLoaded && (load.confirmedOf.has(file) || [...load.replaced.values()].some((row) => row.file === file)));
  }

  withdraw(file: string): void {
    const load = this.#loads.find((other) => other.file === file);
    if (!load) throw new Error(`${file} was never loaded.`);
    for (const key of load.added) this.#rows.delete(key);
    for (const [key, row] of load.replaced) this.#rows.set(key, row);
    load.isLoaded = false;
  }

  /** The table as the database should have it, with the price that planning says; `regionOf` a store, and the regular price. */
  table({ regionOf, regularPrice }: { regionOf: (store: string) => string; regularPrice: number }): string[] {
    const rows = [...this.#rows.values()];
    const told = rows.map((row) => ({ row, price: modelledPrice({ ...row, shelfPrice: null, regionPrice: null, regularPrice: null }).price }));
    const lines = rows.map((row) => {
      const neighbours = told.filter(({ row: other, price }) => price !== null && other.week === row.week && regionOf(other.store) === regionOf(row.store));
      const regionPrice = commonestPrice(neighbours.map(({ price }) => price ?? 0));
      const { price, source } = modelledPrice({ ...row, shelfPrice: null, regionPrice, regularPrice });
      return `${row.week} ${row.store} ${row.units} ${row.file} ${price} ${source}`;
    });
    return lines.sort();
  }
}
