import { addWeeks, firstDayOfWeek, type Day, type WeekStart } from "@shared/calendar";

/** The chain's weeks are ISO weeks: they begin on Monday. */
export const weekStart: WeekStart = 1;

/** Weeks of sales: three years. */
export const weekCount = 156;

/** Today of the generator when none is passed in; the last full week before it begins on 25 May 2026. */
export const defaultToday: Day = "2026-06-01";

/** The Monday on or before a day. */
export const mondayOf = (day: Day): Day => firstDayOfWeek(day, weekStart);

/** The first days of the last `weekCount` weeks that ended before `today`, earliest first. */
export function weeksBefore(today: Day): Day[] {
  const current = mondayOf(today);
  return Array.from({ length: weekCount }, (_, index) => addWeeks(current, index - weekCount));
}
