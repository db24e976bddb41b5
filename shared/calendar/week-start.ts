import { CalendarError } from "./calendar-error";

/** The day on which a chain's week begins: 0 Sunday, 1 Monday ... 6 Saturday. */
export type WeekStart = 0 | 1 | 2 | 3 | 4 | 5 | 6;

/** Names of the days a week can begin on, in the order of their numbers. */
export const weekdayNames = ["sunday", "monday", "tuesday", "wednesday", "thursday", "friday", "saturday"] as const;

/** A day of the week by its English name. */
export type WeekdayName = (typeof weekdayNames)[number];

/**
 * Reads a week start given as a number, its text or an English name in any case.
 *
 * @throws CalendarError "unknown-week-start", naming what is accepted.
 * @example parseWeekStart("Thursday") // 4
 */
export function parseWeekStart(value: number | string): WeekStart {
  const word = String(value).trim().toLowerCase();
  const named = weekdayNames.findIndex((name) => name === word);
  const number = named >= 0 ? named : /^[0-6]$/.test(word) ? Number(word) : -1;
  if (isWeekStart(number)) return number;
  const accepted = `0 (Sunday) to 6 (Saturday) or ${weekdayNames.join(", ")}`;
  throw new CalendarError("unknown-week-start", `"${value}" is no start of a week: use ${accepted}.`);
}

function isWeekStart(number: number): number is WeekStart {
  return Number.isInteger(number) && number >= 0 && number <= 6;
}
