import { addDays } from "@shared/calendar";
import type { EventRow, Region } from "../types";
import { mondayOf } from "./calendar";
import { easterSunday } from "./easter";

export type EventCode = "spring_fair" | "easter" | "winter_feast" | "autumn_holidays" | "regatta";

type YearlyEvent = {
  code: EventCode;
  name: string;
  region: Region | null;
  /** First day (a Monday) in a year: events of the chain fill whole weeks and never share one in a region. */
  firstDay: (year: number) => string;
};

/** Tides and school boards move these two from year to year, which tells them apart from the season. */
const regattaDay = (year: number) => ["07-11", "07-25", "07-18"][year % 3];
const holidayDay = (year: number) => ["10-14", "10-28", "10-21", "10-17"][year % 4];

const weekOf = (day: (year: number) => string) => (year: number) => mondayOf(`${year}-${day(year)}`);

const yearlyEvents: YearlyEvent[] = [
  { code: "easter", name: "Week before Easter", region: null, firstDay: (year) => addDays(easterSunday(year), -6) },
  { code: "spring_fair", name: "Larkmoor Spring Fair", region: "Moor", firstDay: weekOf(() => "05-10") },
  { code: "regatta", name: "Coast Regatta", region: "Coast", firstDay: weekOf(regattaDay) },
  { code: "autumn_holidays", name: "Autumn school holidays", region: null, firstDay: weekOf(holidayDay) },
  { code: "winter_feast", name: "Week of 24 December", region: null, firstDay: weekOf(() => "12-24") },
];

/** The chain's events from the first year given to the last, in order of their first day. */
export function eventsOfYears(firstYear: number, lastYear: number): EventRow[] {
  const years = Array.from({ length: lastYear - firstYear + 1 }, (_, index) => firstYear + index);
  return years
    .flatMap((year) =>
      yearlyEvents.map(({ code, name, region, firstDay }) => {
        const first = firstDay(year);
        return { event: code, name, firstDay: first, lastDay: addDays(first, 6), region };
      }),
    )
    .sort((one, other) => one.firstDay.localeCompare(other.firstDay));
}
