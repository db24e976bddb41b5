import { addWeeks, firstDayOfWeek, weeksApart, weeksBetween, type Day, type WeekStart } from "@shared/calendar";
import type { LoadedWeeks } from "@shared/contract/extracts";

/** Twenty years: a week given wrongly far back must not make the list endless. */
const mostWeeks = 1043;

/**
 * Which of the chain's weeks are missing between those loaded, which comes next, and how many after it have ended.
 *
 * @param loaded first days of weeks, in any order; a day within a week counts as that week.
 */
export function standingOf(
  loaded: readonly Day[],
  { today, weekStart }: { today: Day; weekStart: WeekStart },
): LoadedWeeks {
  const known = new Set(loaded.map((day) => firstDayOfWeek(day, weekStart)));
  const weeks = [...known].sort();
  const [first] = weeks;
  const last = weeks.at(-1);
  if (first === undefined || last === undefined) return { first: null, last: null, missing: [], expected: null, overdue: 0 };
  const reach = addWeeks(last, -mostWeeks);
  const missing = weeksBetween(first > reach ? first : reach, last).filter((week) => !known.has(week));
  const overdue = Math.max(0, weeksApart(last, firstDayOfWeek(today, weekStart)) - 1);
  return { first, last, missing, expected: addWeeks(last, 1), overdue };
}
