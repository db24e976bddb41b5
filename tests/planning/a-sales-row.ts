import { addWeeks } from "@shared/calendar";
import type { SalesRow } from "@shared/planning";

/** A week like any other, changed as a test needs it. */
export function aSalesRow(changes: Partial<SalesRow> = {}): SalesRow {
  return {
    store: "S1", product: "P1", week: "2024-01-01", units: 40, netSales: 71.6, regularPrice: 1.79, shelfPrice: 1.79,
    price: 1.79, priceSource: "shelf", feature: false, display: false, mechanic: "none", openDays: 7, stockOutDays: 0,
    temperatureC: 12, event: null, ...changes,
  };
}

/** So many weeks in a row, each changed by its number. */
export function salesRows(count: number, changes: (index: number) => Partial<SalesRow> = () => ({})): SalesRow[] {
  return Array.from({ length: count }, (_, index) => aSalesRow({ week: addWeeks("2024-01-01", index), ...changes(index) }));
}
