import { CalendarError } from "./calendar-error";

/** A day as plain text, "YYYY-MM-DD" (ISO 8601-1, 5.2.2.1), without time or zone. Such texts sort by date. */
export type Day = string;

const DAY_PATTERN = /^(\d{4})-(\d{2})-(\d{2})$/;

/** Days from 1 March of the year 0 to 1970-01-01. Years that begin in March have their leap day last. */
const EPOCH_FROM_MARCH_OF_YEAR_0 = 719_468;
const DAYS_PER_400_YEARS = 146_097;
const FIRST_YEAR = 100;

/**
 * Whole days from 1970-01-01 to a day (negative before), by integer arithmetic on the Gregorian calendar (after Fliegel & Van
 * Flandern, Communications of the ACM 11 (1968) 657): no clock, no zone and no summer time can move a result.
 *
 * @throws CalendarError "not-a-day" unless the text is YYYY-MM-DD and that day exists (years 0100 to 9999).
 * @example dayNumber("1970-01-05") // 4
 */
export function dayNumber(day: Day): number {
  const parts = DAY_PATTERN.exec(day);
  if (parts !== null) {
    const [year, month, date] = [Number(parts[1]), Number(parts[2]), Number(parts[3])];
    const exists = month >= 1 && month <= 12 && date >= 1 && date <= daysInMonth(year, month);
    if (exists && year >= FIRST_YEAR) return numberOf(year, month, date);
  }
  throw new CalendarError("not-a-day", `"${day}" is not a day: a day is written YYYY-MM-DD and must exist.`);
}

/**
 * The day that lies so many whole days after 1970-01-01: the inverse of `dayNumber`.
 *
 * @throws CalendarError "not-a-day" for a number that is not whole or lies outside the years 0100 to 9999.
 * @example dayFromNumber(4) // "1970-01-05"
 */
export function dayFromNumber(number: number): Day {
  const { year, month, date } = partsOfNumber(number);
  if (!Number.isInteger(number) || year < FIRST_YEAR || year > 9999) {
    throw new CalendarError("not-a-day", `Day number ${number} is not a day of the years 100 to 9999.`);
  }
  return `${String(year).padStart(4, "0")}-${String(month).padStart(2, "0")}-${String(date).padStart(2, "0")}`;
}

/** The calendar year that a day number falls in. */
export function yearOfNumber(number: number): number {
  return partsOfNumber(number).year;
}

/** The number of a calendar year's 1 January. */
export function numberOfNewYear(year: number): number {
  return numberOf(year, 1, 1);
}

/** Days before a month in a year that begins in March (month 0): 0, 31, 61, 92, ... */
function daysBeforeMonth(monthFromMarch: number): number {
  return Math.floor((153 * monthFromMarch + 2) / 5);
}

function numberOf(year: number, month: number, date: number): number {
  const yearFromMarch = month > 2 ? year : year - 1;
  const monthFromMarch = month > 2 ? month - 3 : month + 9;
  const leapDays = Math.floor(yearFromMarch / 4) - Math.floor(yearFromMarch / 100) + Math.floor(yearFromMarch / 400);
  return 365 * yearFromMarch + leapDays + daysBeforeMonth(monthFromMarch) + date - 1 - EPOCH_FROM_MARCH_OF_YEAR_0;
}

function partsOfNumber(number: number): { year: number; month: number; date: number } {
  const day = number + EPOCH_FROM_MARCH_OF_YEAR_0;
  const cycle = Math.floor(day / DAYS_PER_400_YEARS);
  const dayOfCycle = day - cycle * DAYS_PER_400_YEARS;
  // Leap days left out, every year has 365 days: one a 4 years (1,461 days), less one a century, plus the cycle's last day.
  const leapDays = Math.floor(dayOfCycle / 1_460) - Math.floor(dayOfCycle / 36_524) + Math.floor(dayOfCycle / 146_096);
  const yearOfCycle = Math.floor((dayOfCycle - leapDays) / 365);
  const leapDaysBefore = Math.floor(yearOfCycle / 4) - Math.floor(yearOfCycle / 100);
  const dayFromMarch = dayOfCycle - 365 * yearOfCycle - leapDaysBefore;
  const monthFromMarch = Math.floor((5 * dayFromMarch + 2) / 153);
  const month = monthFromMarch < 10 ? monthFromMarch + 3 : monthFromMarch - 9;
  const year = 400 * cycle + yearOfCycle + (month <= 2 ? 1 : 0);
  return { year, month, date: dayFromMarch - daysBeforeMonth(monthFromMarch) + 1 };
}

function daysInMonth(year: number, month: number): number {
  if (month === 2) return daysInYear(year) - 337;
  return month === 4 || month === 6 || month === 9 || month === 11 ? 30 : 31;
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
  const number = dayNumber(day);
  return number - numberOfNewYear(yearOfNumber(number)) + 1;
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
  return yearOfNumber(dayNumber(day));
}
