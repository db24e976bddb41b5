import { CalendarError } from "./calendar-error";

/** A day as plain text, "YYYY-MM-DD" (ISO 8601-1, 5.2.2.1), without time or zone. Such texts sort by date. */
export type Day = string;

const DAY_PATTERN = /^(\d{4})-(\d{2})-(\d{2})$/;
const MILLISECONDS_PER_DAY = 86_400_000;

/**
 * Whole days from 1970-01-01 to a day (negative before). Days are counted in UTC, where each has 24 hours,
 * so no change of summer time can move a result.
 *
 * @throws CalendarError "not-a-day" unless the text is YYYY-MM-DD and that day exists (years 0100 to 9999).
 * @example dayNumber("1970-01-05") // 4
 */
export function dayNumber(day: Day): number {
  const parts = DAY_PATTERN.exec(day);
  if (parts) {
    const number = Date.UTC(Number(parts[1]), Number(parts[2]) - 1, Number(parts[3])) / MILLISECONDS_PER_DAY;
    // 30 February overflows into March, and years below 100 are read as 19xx: both come back as another text.
    if (dayFromNumber(number) === day) return number;
  }
  throw new CalendarError("not-a-day", `"${day}" is not a day: a day is written YYYY-MM-DD and must exist.`);
}

/**
 * The day that lies so many whole days after 1970-01-01: the inverse of `dayNumber`.
 *
 * @example dayFromNumber(4) // "1970-01-05"
 */
export function dayFromNumber(number: number): Day {
  return new Date(number * MILLISECONDS_PER_DAY).toISOString().slice(0, 10);
}

/**
 * Whether a text is a day that exists, written YYYY-MM-DD.
 *
 * @example isDay("2023-02-29") // false
 */
export function isDay(text: string): boolean {
  try {
    dayNumber(text);
    return true;
  } catch {
    return false;
  }
}

/**
 * The day so many days later (earlier when negative).
 *
 * @throws CalendarError "not-a-day".
 * @example addDays("2024-02-28", 2) // "2024-03-01"
 */
export function addDays(day: Day, days: number): Day {
  return dayFromNumber(dayNumber(day) + days);
}

/**
 * The day of the week: 0 Sunday, 1 Monday ... 6 Saturday.
 *
 * @throws CalendarError "not-a-day".
 * @example dayOfWeek("2026-06-08") // 1, a Monday
 */
export function dayOfWeek(day: Day): number {
  return weekdayOfNumber(dayNumber(day));
}

/** The day of the week of a day number, 0 Sunday to 6 Saturday; 1970-01-01 was a Thursday. */
export function weekdayOfNumber(number: number): number {
  return (((number + 4) % 7) + 7) % 7;
}

/**
 * The day's place in its calendar year, from 1 to 365 or 366.
 *
 * @throws CalendarError "not-a-day".
 * @example dayOfYear("2024-12-31") // 366
 */
export function dayOfYear(day: Day): number {
  return dayNumber(day) - dayNumber(`${day.slice(0, 4)}-01-01`) + 1;
}

/**
 * How many days a calendar year has (Gregorian rule): 366 in a leap year, else 365.
 *
 * @example daysInYear(1900) // 365: divisible by 100, not by 400
 */
export function daysInYear(year: number): number {
  const isLeap = (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0;
  return isLeap ? 366 : 365;
}

/**
 * The calendar year of a day.
 *
 * @throws CalendarError "not-a-day".
 * @example yearOf("2026-06-08") // 2026
 */
export function yearOf(day: Day): number {
  dayNumber(day);
  return Number(day.slice(0, 4));
}
