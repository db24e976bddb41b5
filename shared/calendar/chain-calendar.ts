import { CalendarError } from "./calendar-error";
import { addDays, dayOfWeek, isDay } from "./day";
import type { Day } from "./day";
import { isoWeekMonday, isoWeekOf } from "./iso-week";
import type { WeekNumber } from "./iso-week";
import { retailWeekOf } from "./retail-week";
import { firstDayOfWeek, middleDayOfWeek } from "./week";
import { weekdayNames } from "./week-start";
import type { WeekStart } from "./week-start";

/** How a chain numbers its weeks and on which day they begin. */
export type ChainCalendar = { kind: "iso" | "4-5-4"; weekStart: WeekStart };

const ISO_WEEK_PATTERN = /^(\d{4})-W(\d{2})$/;

/**
 * Refuses a pair of settings that contradict each other: 4-5-4 years end on a Saturday, so their weeks begin on Sunday.
 * ISO numbering goes with any week start (see `weekNumberOf`).
 *
 * @throws CalendarError "calendar-and-week-start-disagree".
 * @example requireChainCalendar({ kind: "4-5-4", weekStart: 1 }) // throws
 */
export function requireChainCalendar(calendar: ChainCalendar): ChainCalendar {
  if (calendar.kind === "4-5-4" && calendar.weekStart !== 0) {
    throw new CalendarError(
      "calendar-and-week-start-disagree",
      `Weeks of the 4-5-4 calendar run Sunday to Saturday: they cannot begin on ${capitalised(weekdayNames[calendar.weekStart])}.`,
    );
  }
  return calendar;
}

/**
 * Year and number of the week that begins on a day. Under ISO a week has the number of the ISO week that holds its middle
 * day: for weeks from Monday that is ISO 8601 itself, for any other start each week still has one number of its own.
 *
 * @throws CalendarError "not-a-day".
 * @example weekNumberOf({ kind: "iso", weekStart: 1 }, "2026-06-08") // { year: 2026, week: 24 }
 */
export function weekNumberOf(calendar: ChainCalendar, firstDay: Day): WeekNumber {
  if (calendar.kind === "iso") return isoWeekOf(middleDayOfWeek(firstDay));
  const { year, week } = retailWeekOf(firstDay);
  return { year, week };
}

/**
 * The week's name for people: "2026-W24" under ISO, "2024 week 1" (fiscal year) under 4-5-4.
 *
 * @throws CalendarError "not-a-day".
 * @example weekLabel({ kind: "4-5-4", weekStart: 0 }, "2024-02-04") // "2024 week 1"
 */
export function weekLabel(calendar: ChainCalendar, firstDay: Day): string {
  const { year, week } = weekNumberOf(calendar, firstDay);
  if (calendar.kind === "iso") return `${String(year).padStart(4, "0")}-W${String(week).padStart(2, "0")}`;
  return `${year} week ${week}`;
}

/**
 * Reads a week as people and files write it: its first day, or, under ISO only, a number such as 2026-W24.
 *
 * @returns the week's first day.
 * @throws CalendarError "not-a-first-day" (naming the day meant), "week-number-needs-iso", "no-such-week", "not-a-week".
 * @example parseWeek({ kind: "iso", weekStart: 1 }, "2026-W24") // "2026-06-08"
 */
export function parseWeek(calendar: ChainCalendar, text: string): Day {
  const numbered = ISO_WEEK_PATTERN.exec(text);
  if (numbered) return firstDayOfNumberedWeek(calendar, { text, year: Number(numbered[1]), week: Number(numbered[2]) });
  if (!isDay(text)) {
    const forms = calendar.kind === "iso" ? "its first day, YYYY-MM-DD, or a number such as 2026-W24" : "its first day, YYYY-MM-DD";
    throw new CalendarError("not-a-week", `"${text}" is not a week: write ${forms}.`);
  }
  const firstDay = firstDayOfWeek(text, calendar.weekStart);
  if (firstDay !== text) {
    const [is, begins] = [weekdayNames[dayOfWeek(text)], weekdayNames[calendar.weekStart]].map(capitalised);
    throw new CalendarError(
      "not-a-first-day",
      `${text} is a ${is}, but weeks begin on ${begins}: the week that holds it begins on ${firstDay}.`,
    );
  }
  return text;
}

function firstDayOfNumberedWeek(calendar: ChainCalendar, { text, year, week }: WeekNumber & { text: string }): Day {
  if (calendar.kind !== "iso") {
    throw new CalendarError(
      "week-number-needs-iso",
      `"${text}" is an ISO week number, but the chain uses the 4-5-4 calendar: give the week's first day.`,
    );
  }
  const monday = isoWeekMonday({ year, week });
  // The chain's week whose middle day is one of this ISO week's seven days.
  const middle = addDays(monday, (calendar.weekStart + 3 - 1 + 7) % 7);
  return addDays(middle, -3);
}

function capitalised(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1);
}
