import { CalendarError } from "./calendar-error";
import { addDays, dayFromNumber, dayNumber, weekdayOfNumber } from "./day";
import type { Day } from "./day";
import type { WeekStart } from "./week-start";

/** Monday 5 January 1970: weeks are counted from here, whatever day the chain's week begins on. */
const EPOCH_MONDAY = 4;

/** More weeks than any list for people or a plan can need: thirty years. */
const MOST_WEEKS_LISTED = 1_600;

/**
 * The first day of the week that contains a day.
 *
 * @throws CalendarError "not-a-day".
 * @example firstDayOfWeek("1990-06-20", 4) // "1990-06-14", a Thursday
 */
export function firstDayOfWeek(day: Day, weekStart: WeekStart): Day {
  const number = dayNumber(day);
  return dayFromNumber(number - ((weekdayOfNumber(number) - weekStart + 7) % 7));
}

/**
 * The last day of the week that begins on a day ("week ending").
 *
 * @throws CalendarError "not-a-day".
 * @example lastDayOfWeek("2026-06-08") // "2026-06-14"
 */
export function lastDayOfWeek(firstDay: Day): Day {
  return addDays(firstDay, 6);
}

/**
 * The middle (fourth) day of the week that begins on a day. Under ISO 8601 it decides which year a week belongs to.
 *
 * @throws CalendarError "not-a-day".
 * @example middleDayOfWeek("2026-06-08") // "2026-06-11"
 */
export function middleDayOfWeek(firstDay: Day): Day {
  return addDays(firstDay, 3);
}

/**
 * The day so many weeks later (earlier when negative).
 *
 * @throws CalendarError "not-a-day".
 * @example addWeeks("2024-02-26", 1) // "2024-03-04"
 */
export function addWeeks(day: Day, weeks: number): Day {
  return addDays(day, 7 * weeks);
}

/**
 * How many weeks lie between two first days of weeks: later minus earlier, negative when reversed.
 *
 * @throws CalendarError "not-a-day"; "not-whole-weeks" when the days are not whole weeks apart.
 * @example weeksApart("2026-06-08", "2026-07-13") // 5
 */
export function weeksApart(earlier: Day, later: Day): number {
  const days = dayNumber(later) - dayNumber(earlier);
  if (days % 7 !== 0) {
    throw new CalendarError("not-whole-weeks", `${earlier} and ${later} are ${days} days apart, which is not whole weeks.`);
  }
  return days / 7;
}

/**
 * First days of all weeks from one to another, both included; empty when the last lies before the first.
 *
 * @throws CalendarError "not-a-day"; "not-whole-weeks"; "too-many-weeks" above 1,600.
 * @example weeksBetween("2026-06-08", "2026-06-22") // ["2026-06-08", "2026-06-15", "2026-06-22"]
 */
export function weeksBetween(firstWeek: Day, lastWeek: Day): Day[] {
  const count = weeksApart(firstWeek, lastWeek) + 1;
  if (count > MOST_WEEKS_LISTED) {
    throw new CalendarError(
      "too-many-weeks",
      `${firstWeek} to ${lastWeek} are ${count} weeks: at most ${MOST_WEEKS_LISTED} are listed at once.`,
    );
  }
  const first = dayNumber(firstWeek);
  return Array.from({ length: Math.max(0, count) }, (_, index) => dayFromNumber(first + 7 * index));
}

/**
 * Whole weeks from Monday 5 January 1970 to the week's first day, rounded down, for any week start:
 * it grows by one from week to week and is equal for all stores of a chain in the same week.
 *
 * @throws CalendarError "not-a-day".
 * @example weekIndex("2026-06-08") // 2944
 */
export function weekIndex(firstDay: Day): number {
  return Math.floor((dayNumber(firstDay) - EPOCH_MONDAY) / 7);
}

/**
 * The first day of the week with an index: the inverse of `weekIndex` for a chain's week start.
 *
 * @example weekFromIndex(2944, 1) // "2026-06-08"
 */
export function weekFromIndex(index: number, weekStart: WeekStart): Day {
  return dayFromNumber(EPOCH_MONDAY + 7 * index + ((weekStart + 6) % 7));
}
