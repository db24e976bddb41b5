import type { Day } from "@shared/calendar";

/** The date of a moment in a time zone, YYYY-MM-DD (the Swedish form of dates is ISO 8601's). */
export function dayIn(timeZone: string, now: Date): Day {
  return new Intl.DateTimeFormat("sv-SE", { timeZone, dateStyle: "short" }).format(now);
}
