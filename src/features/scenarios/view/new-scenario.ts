import { addWeeks, firstDayOfWeek, weeksBetween } from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";

export const mostWeeks = 104;

/** The chain's week that begins after the day given: plans are about weeks that have not begun. */
export const nextWeek = (today: string, weekStart: WeekStart): string => addWeeks(firstDayOfWeek(today, weekStart), 1);

/** First weeks to choose from: half a year back, to see how a plan would have done, to a year and a half ahead. */
export const weekChoices = (today: string, weekStart: WeekStart): string[] => {
  const now = nextWeek(today, weekStart);
  return weeksBetween(addWeeks(now, -26), addWeeks(now, 78));
};

export const lastWeekOf = (first: string, count: number): string => addWeeks(first, count - 1);
