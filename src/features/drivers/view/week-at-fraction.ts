import { addDays, firstDayOfWeek } from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";

/** The week of a year that holds a place on the year's circle from 0 to 1. */
export const weekAtFraction = (fraction: number, year: number, weekStart: WeekStart): string => {
  const isLeap = new Date(Date.UTC(year, 1, 29)).getUTCMonth() === 1;
  const days = isLeap ? 366 : 365;
  const day = Math.min(days - 1, Math.max(0, Math.floor(fraction * days)));
  return firstDayOfWeek(addDays(`${year}-01-01`, day), weekStart);
};
