import { dayNumber, daysInYear, numberOfNewYear, yearOfNumber } from "./day";
import type { Day } from "./day";

/**
 * Where in the year a week lies, on a circle from 0 to 1: (day of year - 0.5) / days in that year, of the week's middle day.
 * Being a place and not a week number, it needs no rule for week 53 and moves evenly across New Year.
 *
 * @param firstDay the week's first day.
 * @throws CalendarError "not-a-day".
 * @example yearFraction("2025-06-30") // (184 - 0.5) / 365 = 0.50274
 */
export function yearFraction(firstDay: Day): number {
  const middle = dayNumber(firstDay) + 3;
  const year = yearOfNumber(middle);
  return (middle - numberOfNewYear(year) + 0.5) / daysInYear(year);
}
