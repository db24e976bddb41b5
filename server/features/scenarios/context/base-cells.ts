import { weekIndex, yearFraction, type Day } from "@shared/calendar";
import type { BaseCell } from "@shared/contract/scenarios";
import type { RegionEvent, Terms, ToldBySales } from "./planned-weeks.repository";
import type { Normal } from "./store-temperatures";
import { termsOf, toldValue } from "./told-value";

export type PlannedStore = { code: string; region: string };

export type BaseFacts = {
  stores: readonly PlannedStore[];
  weeks: readonly Day[];
  /** By store and week, in any order. */
  toldBySales: readonly ToldBySales[];
  /** Oldest first. */
  terms: readonly Terms[];
  events: readonly RegionEvent[];
  normals: (store: PlannedStore, week: Day) => Normal;
};

/** What holds in each store-week before anything is planned, store by store. */
export function baseCells({ stores, weeks, toldBySales, terms, events, normals }: BaseFacts): BaseCell[] {
  const rowsOf = new Map<string, ToldBySales[]>(stores.map(({ code }) => [code, []]));
  for (const row of toldBySales) rowsOf.get(row.store)?.push(row);
  const eventAt = new Map(events.map(({ region, week, event }) => [`${region}\n${week}`, event]));
  return stores.flatMap((store) => {
    const rows = (rowsOf.get(store.code) ?? []).sort((one, other) => (one.week < other.week ? -1 : 1));
    return weeks.map((week) => ({
      store: store.code,
      week,
      regularPrice: toldValue({ rows, terms, week, what: "regularPrice" }),
      normalTemperatureC: normals(store, week).temperatureC,
      event: rows.find((row) => row.week === week)?.event ?? eventAt.get(`${store.region}\n${week}`) ?? null,
      yearFraction: yearFraction(week),
      weekIndex: weekIndex(week),
      unitCost: toldValue({ rows, terms, week, what: "unitCost" }),
      taxRate: termsOf(terms, week)?.taxRate ?? 0,
    }));
  });
}
