import { parseWeekStart, type ChainCalendar } from "@shared/calendar";
import type { ChainRow } from "./chain.entities";

/** The calendar by which a chain counts its weeks. */
export function calendarOf({ calendar, weekStart }: Pick<ChainRow, "calendar" | "weekStart">): ChainCalendar {
  return { kind: calendar, weekStart: parseWeekStart(weekStart) };
}
