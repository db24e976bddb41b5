import { dayOfWeek } from "../calendar";
import type { DateOrder, WeekDay } from "../contract/layouts";
import { most, type ColumnProfile } from "./column-profile";
import { firstDayWords, lastDayWords } from "./column-words";
import { shareOf, type Detected, type LayoutWarning } from "./detected";
import { normalName } from "./normal-name";
import { readDay, yearLastParts } from "./read-day";

/** Columns whose values are days or weeks. */
export const isDayColumn = ({ days, values }: ColumnProfile) => values.length > 0 && days >= most;

/**
 * The order of day and month in a file: by days that one order does not have, over all values; else by the order in which the
 * values of a column fall on one day of the week, as first or last days of weeks do; else by dots, which no month-first
 * writing uses. What stays open is said, also where the chain's weeks make one order the likelier.
 *
 * @param weekStart the day on which the chain's weeks begin, 0 Sunday to 6 Saturday
 * @example detectDateOrder(profileColumns([["13/06/2026"]], ["week"])).value // "dmy"
 */
export function detectDateOrder(profiles: readonly ColumnProfile[], weekStart?: number): Detected<DateOrder> {
  const columns = profiles.filter(isDayColumn).map(({ values }) => [...new Set(values.filter((value) => yearLastParts(value)))]);
  const values = columns.flat();
  if (values.length === 0) return { value: "iso", confidence: profiles.some(isDayColumn) ? 1 : 0.5, warnings: [] };
  const [dayFirst, monthFirst] = [countDays(values, "dmy"), countDays(values, "mdy")];
  if (dayFirst !== monthFirst) {
    const [value, readable]: [DateOrder, number] = dayFirst > monthFirst ? ["dmy", dayFirst] : ["mdy", monthFirst];
    return { value, confidence: readable / values.length, warnings: readable < values.length ? [mixed(values.length - readable)] : [] };
  }
  if (values.every((value) => day(value, "dmy") === day(value, "mdy"))) return { value: "dmy", confidence: 0.5, warnings: [openOrder(values)] };
  return byWeekday(columns) ?? bySign(values) ?? byWeekStart(values, weekStart);
}

const day = (value: string, order: DateOrder): string | null => {
  const reading = readDay(value, order);
  return "day" in reading ? reading.day : null;
};

const countDays = (values: readonly string[], order: DateOrder) => values.filter((value) => day(value, order) !== null).length;

function byWeekday(columns: readonly string[][]): Detected<DateOrder> | null {
  for (const values of columns.filter(({ length }) => length > 1)) {
    const fallOnOneDay = (order: DateOrder) => new Set(values.map((value) => dayOfWeek(day(value, order) ?? "1970-01-01"))).size === 1;
    const [dayFirst, monthFirst] = [fallOnOneDay("dmy"), fallOnOneDay("mdy")];
    if (dayFirst !== monthFirst) return { value: dayFirst ? "dmy" : "mdy", confidence: values.length > 2 ? 0.95 : 0.85, warnings: [] };
  }
  return null;
}

function bySign(values: readonly string[]): Detected<DateOrder> | null {
  const isDotted = values.every((value) => yearLastParts(value)?.sign === ".");
  return isDotted ? { value: "dmy", confidence: 0.9, warnings: [] } : null;
}

/** The order in which the days begin or end weeks of the chain; one day can do so by chance, so it is asked about. */
function byWeekStart(values: readonly string[], weekStart: number | undefined): Detected<DateOrder> {
  const bounds = weekStart === undefined ? [] : [weekStart, (weekStart + 6) % 7];
  const bound = (order: DateOrder) => values.filter((value) => bounds.includes(dayOfWeek(day(value, order) ?? "1970-01-01"))).length;
  const value = bound("mdy") > bound("dmy") ? "mdy" : "dmy";
  return { value, confidence: 0.5, warnings: [openOrder(values, value)] };
}

const openOrder = ([example = ""]: readonly string[], order: DateOrder = "dmy"): LayoutWarning => ({
  code: "dates-ambiguous",
  message: `No date tells whether the day or the month comes first; "${example}" is taken as ${day(example, order) ?? "a day"}.`,
});

const mixed = (count: number): LayoutWarning => ({
  code: "dates-mixed", message: `${count} of the first dates cannot be read in the order of the others.`,
});

/**
 * Whether a file gives the first or the last day of a week: by the days on which the chain's weeks begin and end, where the
 * values fall on one of them; else by the column's name, else by the day of the week. A Sunday can be either, so a warning
 * says what is taken.
 *
 * @example detectWeekDay({ ...profile, name: "Week ending" }, { order: "iso" }).value // "last"
 */
export function detectWeekDay(profile: ColumnProfile | undefined, { order, weekStart }: { order: DateOrder; weekStart?: number }): Detected<WeekDay> {
  const days = profile?.values.map((value) => day(value, order)).filter((value) => value !== null) ?? [];
  if (!profile || days.length === 0) return { value: "first", confidence: 0.5, warnings: [] };
  const chains = weekStart === undefined ? null : byChainsWeek(days, weekStart);
  if (chains) return chains;
  const name = ` ${normalName(profile.name)} `;
  const isNamed = (words: readonly string[]) => words.some((word) => name.includes(` ${word} `));
  if (isNamed(lastDayWords)) return { value: "last", confidence: 0.95, warnings: [] };
  if (isNamed(firstDayWords)) return { value: "first", confidence: 0.95, warnings: [] };
  const only = [sunday, monday, 2, 3, 4, 5, saturday].find((weekday) => shareOf(days, (value) => dayOfWeek(value) === weekday) >= most);
  if (only === undefined) return { value: "first", confidence: 0.3, warnings: [severalWeekdays(profile.position)] };
  if (only === saturday) return { value: "last", confidence: 0.7, warnings: [] };
  if (only === sunday) return { value: "last", confidence: 0.5, warnings: [sundays(profile.position)] };
  return { value: "first", confidence: only === monday ? 0.9 : 0.6, warnings: [] };
}

/** A name may say "week ending" over first days: what fits the chain's weeks is right. */
function byChainsWeek(days: readonly string[], weekStart: number): Detected<WeekDay> | null {
  const fallOn = (weekday: number) => shareOf(days, (value) => dayOfWeek(value) === weekday) >= most;
  if (fallOn(weekStart)) return { value: "first", confidence: 1, warnings: [] };
  return fallOn((weekStart + 6) % 7) ? { value: "last", confidence: 1, warnings: [] } : null;
}

const [sunday, monday, saturday] = [0, 1, 6];

const sundays = (position: number): LayoutWarning => ({
  code: "week-day-ambiguous", message: "Weeks are given by Sundays, which are taken as their last days. Correct it if they are the first.", position,
});

const severalWeekdays = (position: number): LayoutWarning => ({
  code: "not-weekly", message: "The dates fall on several days of the week: the file seems to be daily, not weekly.", position,
});
