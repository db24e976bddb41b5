import { CalendarError } from "./calendar-error";
import { addDays, dayNumber, numberOfNewYear, weekdayOfNumber, yearOfNumber } from "./day";
import type { Day } from "./day";

/** A numbered week of a year that need not be the calendar year of each of its days. */
export type WeekNumber = { year: number; week: number };

/**
 * The ISO 8601 week that a day falls in: weeks run Monday to Sunday and belong to the calendar year of their Thursday
 * (ISO 8601-1:2019, 3.1.1.23). Some years have 53 weeks, among them 2015, 2020 and 2026.
 *
 * @throws CalendarError "not-a-day".
 * @example isoWeekOf("2027-01-03") // { year: 2026, week: 53 }
 */
export function isoWeekOf(day: Day): WeekNumber {
  const number = dayNumber(day);
  const mondayBased = (weekdayOfNumber(number) + 6) % 7;
  const thursday = number - mondayBased + 3;
  const year = yearOfNumber(thursday);
  return { year, week: Math.floor((thursday - numberOfNewYear(year)) / 7) + 1 };
}

/**
 * How many ISO weeks a year has: 28 December always falls in the last one.
 *
 * @example isoWeeksInYear(2026) // 53
 */
export function isoWeeksInYear(year: number): number {
  return isoWeekOf(`${String(year).padStart(4, "0")}-12-28`).week;
}

/**
 * The Monday on which an ISO week begins; 4 January always falls in week 1.
 *
 * @throws CalendarError "no-such-week" when the year has no week of that number.
 * @example isoWeekMonday({ year: 2026, week: 24 }) // "2026-06-08"
 */
export function isoWeekMonday({ year, week }: WeekNumber): Day {
  const weeks = isoWeeksInYear(year);
  if (!Number.isInteger(week) || week < 1 || week > weeks) {
    throw new CalendarError("no-such-week", `${year} has ISO weeks 1 to ${weeks}: there is no week ${week}.`);
  }
  const fourthOfJanuary = `${String(year).padStart(4, "0")}-01-04`;
  const mondayBased = (weekdayOfNumber(dayNumber(fourthOfJanuary)) + 6) % 7;
  return addDays(fourthOfJanuary, 7 * (week - 1) - mondayBased);
}
