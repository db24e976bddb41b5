import { NO_EVENT, type SalesRow } from "@shared/planning";
import { stores } from "../../demo/chain/stores";
import type { Demo } from "../../demo/types";

/** A product's weeks in one store as the application stores them: with the region's temperature and event. */
export function storedRows(demo: Demo, { product, store }: { product: string; store: string }): SalesRow[] {
  const region = stores.find(({ code }) => code === store)?.region;
  const temperature = new Map(
    demo.temperatures.filter((row) => row.region === region).map((row) => [row.week, row.temperatureC]),
  );
  const event = new Map(
    demo.events.filter((row) => row.region === null || row.region === region).map((row) => [row.firstDay, row.event]),
  );
  return demo.sales
    .filter((row) => row.product === product && row.store === store)
    .map((row) => ({
      ...row,
      price: row.shelfPrice,
      priceSource: "shelf",
      openDays: null,
      stockOutDays: null,
      temperatureC: temperature.get(row.week) ?? null,
      event: event.get(row.week) ?? NO_EVENT,
    }));
}
