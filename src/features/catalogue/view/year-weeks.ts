import {
  addWeeks, firstDayOfWeek, isoWeeksInYear, parseWeek, retailWeekSunday, retailWeeksInYear, weekNumberOf, type ChainCalendar, type Day,
} from "@shared/calendar";

/** First days of the weeks of a year by the chain's calendar: 52, or 53 where the year has them. */
export const weeksOfYear = (calendar: ChainCalendar, year: number): Day[] => {
  const isIso = calendar.kind === "iso";
  const first = isIso ? parseWeek(calendar, `${String(year).padStart(4, "0")}-W01`) : retailWeekSunday({ year, week: 1 });
  const count = isIso ? isoWeeksInYear(year) : retailWeeksInYear(year);
  return Array.from({ length: count }, (_, index) => addWeeks(first, index));
};

/** The year that a day's week is counted in. */
export const yearOfDay = (calendar: ChainCalendar, day: Day): number =>
  weekNumberOf(calendar, firstDayOfWeek(day, calendar.weekStart)).year;

/** The year an address asks for; where it names none, the one that today's week is counted in. */
export const yearFrom = (text: string, calendar: ChainCalendar, today: Day): number =>
  /^(19|20|21)\d\d$/.test(text) ? Number(text) : yearOfDay(calendar, today);
