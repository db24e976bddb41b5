import { addDays, CalendarError, isDay, lastDayOfWeek, parseWeek, type ChainCalendar, type Day } from "@shared/calendar";
import type { Column } from "./row";
import type { RuleName } from "./rules";

type WeekReading = { week: Day } | { rule: RuleName; reason: string };

const earliestWeek = "1970-01-01";
const mostReadings = 10_000;

/** Reads weeks as the chain writes them; a file repeats few weeks many times, so each text is read once. */
export class WeekReader {
  readonly #calendar: ChainCalendar;
  readonly #today: Day;
  readonly #latest: Day;
  /** Weeks that began on this day or before have ended. */
  readonly #endedFrom: Day;
  readonly #readings = new Map<string, WeekReading>();

  /** @param today as it is where the chain is. */
  constructor(calendar: ChainCalendar, today: Day) {
    this.#calendar = calendar;
    this.#today = today;
    this.#latest = addDays(today, 366);
    this.#endedFrom = addDays(today, -7);
  }

  /** The first day of the week that stands in a column; null, and reported, where there is none. */
  read(column: Column): Day | null {
    const text = column.raw;
    if (text === "") return column.report("missing-value");
    const reading = this.#readings.get(text) ?? this.#understand(text);
    return "week" in reading ? reading.week : column.report(reading.rule, { reason: reading.reason });
  }

  /** The same, for what has happened: a week that is still to come is an error, and one that is not over is warned about. */
  readPast(column: Column): Day | null {
    const week = this.read(column);
    if (week === null || week <= this.#endedFrom) return week;
    const more = { reason: `This week begins on ${week} and ends on ${lastDayOfWeek(week)}; today is ${this.#today}` };
    if (week > this.#today) return column.report("week-in-future", more);
    column.report("week-not-over", more);
    return week;
  }

  #understand(text: string): WeekReading {
    const reading = this.#parse(text);
    if (this.#readings.size < mostReadings) this.#readings.set(text, reading);
    return reading;
  }

  #parse(text: string): WeekReading {
    try {
      const week = parseWeek(this.#calendar, text);
      if (week >= earliestWeek && week <= this.#latest) return { week };
      return { rule: "week-out-of-range", reason: `${week} is before 1970 or more than a year ahead` };
    } catch (error) {
      if (!(error instanceof CalendarError)) throw error;
      const rule = error.code === "not-a-first-day" ? "not-week-start" : "bad-week";
      return { rule, reason: error.message.replace(/\.$/, "") };
    }
  }
}

type Days = { first: Column; last: Column; needed?: "first" | "both" };

/** The first and last day of something, as their columns have them; a last one before the first is reported. */
export function daysOf({ first, last, needed }: Days): [first: Day | null, last: Day | null] {
  const [firstDay, lastDay] = [dayOf(first, { needed: needed !== undefined }), dayOf(last, { needed: needed === "both" })];
  if (firstDay !== null && lastDay !== null && lastDay < firstDay) last.report("last-before-first");
  return [firstDay, lastDay];
}

/** The day that stands in a column; null where it is empty, or reported where it is none. */
export function dayOf(column: Column, { needed = false }: { needed?: boolean } = {}): Day | null {
  const text = column.raw;
  if (text === "") return needed ? column.report("missing-value") : null;
  return isDay(text) ? text : column.report("bad-day");
}
