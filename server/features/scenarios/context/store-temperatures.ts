import type { Day } from "@shared/calendar";
import { meanTemperature, normalTemperature, type WeekTemperature } from "../../catalogue";
import type { PlaceTemperature } from "./planned-weeks.repository";

/** A normal temperature, and whether for want of other years it is the mean of all weeks known. */
export type Normal = { temperatureC: number | null; isRough: boolean };

type Place = (week: Day) => Normal;

/**
 * Normal temperatures by store, from what each store's model was fitted on: its own temperatures where it has them, its
 * region's for the other weeks. Stores without any of their own share their region's.
 *
 * @returns a function from a store and a week to its normal temperature; where no other year covers the time of year, the
 * mean of all weeks known, marked as rough.
 */
export function storeNormals(
  temperatures: readonly PlaceTemperature[],
): (store: { code: string; region: string }, week: Day) => Normal {
  const ofRegion = bySource(
    temperatures.filter(({ store }) => store === ""),
    "region",
  );
  const ofStore = bySource(
    temperatures.filter(({ store }) => store !== ""),
    "store",
  );
  const places = new Map<string, Place>();
  return ({ code, region }, week) => {
    const own = ofStore.get(code);
    const key = own ? `store ${code}` : `region ${region}`;
    const place = places.get(key) ?? placeFrom(new Map([...(ofRegion.get(region) ?? []), ...(own ?? [])]));
    places.set(key, place);
    return place(week);
  };
}

function bySource(temperatures: readonly PlaceTemperature[], key: "region" | "store"): Map<string, Map<Day, number>> {
  const sources = new Map<string, Map<Day, number>>();
  for (const entry of temperatures) {
    const weeks = sources.get(entry[key]) ?? new Map<Day, number>();
    sources.set(entry[key], weeks);
    // What came with sales comes first and stays.
    if (!weeks.has(entry.week)) weeks.set(entry.week, entry.temperatureC);
  }
  return sources;
}

function placeFrom(weeks: ReadonlyMap<Day, number>): Place {
  const history: WeekTemperature[] = Array.from(weeks, ([week, temperatureC]) => ({ week, temperatureC }));
  const normal = normalTemperature(history);
  const mean = meanTemperature(history);
  const told = new Map<Day, Normal>();
  const tell = (week: Day): Normal => {
    const temperatureC = normal(week);
    return temperatureC === null ? { temperatureC: mean, isRough: mean !== null } : { temperatureC, isRough: false };
  };
  return (week) => {
    const answer = told.get(week) ?? tell(week);
    told.set(week, answer);
    return answer;
  };
}
