import { CalendarError } from "./calendar-error";
import { dayFromNumber, dayNumber, weekdayOfNumber, yearOf } from "./day";
import type { Day } from "./day";
import type { WeekNumber } from "./iso-week";

/** A week of the 4-5-4 calendar: fiscal year, week (1 to 53), month (1 February ... 12 January) and week within the month. */
export type RetailWeek = WeekNumber & { month: number; weekOfMonth: number };

/** Weeks per month in a quarter; the 53rd week, where there is one, lengthens the last month. */
const WEEKS_PER_MONTH = [4, 5, 4] as const;
const SATURDAY = 6;

/**
 * The Sunday on which a fiscal year of the 4-5-4 calendar begins: the day after the Saturday nearest 31 January
 * (National Retail Federation, 4-5-4 calendar).
 *
 * @example retailYearStart(2024) // "2024-02-04"
 */
export function retailYearStart(year: number): Day {
  const endOfJanuary = dayNumber(`${String(year).padStart(4, "0")}-01-31`);
  const daysToSaturday = (SATURDAY - weekdayOfNumber(endOfJanuary) + 7) % 7;
  const nearest = daysToSaturday <= 3 ? daysToSaturday : daysToSaturday - 7;
  return dayFromNumber(endOfJanuary + nearest + 1);
}

/**
 * How many weeks a fiscal year of the 4-5-4 calendar has: 53 in 2012, 2017 and 2023, among others.
 *
 * @example retailWeeksInYear(2023) // 53
 */
export function retailWeeksInYear(year: number): number {
  return (dayNumber(retailYearStart(year + 1)) - dayNumber(retailYearStart(year))) / 7;
}

/**
 * The 4-5-4 week that a day falls in. Weeks run Sunday to Saturday; each quarter has months of 4, 5 and 4 weeks.
 *
 * @throws CalendarError "not-a-day".
 * @example retailWeekOf("2024-02-04") // { year: 2024, week: 1, month: 1, weekOfMonth: 1 }
 */
export function retailWeekOf(day: Day): RetailWeek {
  const number = dayNumber(day);
  const calendarYear = yearOf(day);
  const year = number >= dayNumber(retailYearStart(calendarYear)) ? calendarYear : calendarYear - 1;
  const week = Math.floor((number - dayNumber(retailYearStart(year))) / 7) + 1;
  return { year, week, ...monthOfWeek(week) };
}

/**
 * The Sunday on which a week of the 4-5-4 calendar begins.
 *
 * @throws CalendarError "no-such-week" when the fiscal year has no week of that number.
 * @example retailWeekSunday({ year: 2023, week: 53 }) // "2024-01-28"
 */
export function retailWeekSunday({ year, week }: WeekNumber): Day {
  const weeks = retailWeeksInYear(year);
  if (!Number.isInteger(week) || week < 1 || week > weeks) {
    throw new CalendarError("no-such-week", `Fiscal ${year} has weeks 1 to ${weeks}: there is no week ${week}.`);
  }
  return dayFromNumber(dayNumber(retailYearStart(year)) + 7 * (week - 1));
}

function monthOfWeek(week: number): { month: number; weekOfMonth: number } {
  let firstWeek = 1;
  for (let month = 1; month < 12; month++) {
    const length = WEEKS_PER_MONTH[(month - 1) % 3];
    if (week < firstWeek + length) return { month, weekOfMonth: week - firstWeek + 1 };
    firstWeek += length;
  }
  return { month: 12, weekOfMonth: week - firstWeek + 1 };
}
