import { addDays, format, parseISO } from "date-fns";
import { enDash, missing } from "./glyphs";

/** "22 June 2026" of a day such as "2026-06-22", which has no time zone. */
export const formatDay = (day: string | null | undefined): string =>
  day ? format(parseISO(day), "d MMMM yyyy") : missing;

/** "22 Jun" */
export const formatShortDay = (day: string): string => format(parseISO(day), "d MMM");

/** The seven days of a week that begins on `firstDay`: "22–28 June 2026", "29 June – 5 July 2026". */
export const formatWeekDays = (firstDay: string, options: { year?: boolean } = {}): string => {
  const { year = true } = options;
  const first = parseISO(firstDay);
  const last = addDays(first, 6);
  const ending = format(last, year ? "d MMMM yyyy" : "d MMMM");
  if (first.getMonth() === last.getMonth()) return `${format(first, "d")}${enDash}${ending}`;
  const sameYear = first.getFullYear() === last.getFullYear() || !year;
  return `${format(first, sameYear ? "d MMMM" : "d MMMM yyyy")} ${enDash} ${ending}`;
};

type InstantOptions = { timeZone?: string; locale?: string };

const formatters = new Map<string, Intl.DateTimeFormat>();

/** Making an Intl formatter costs most of a millisecond; some stand in pages that redraw with every drag. */
const dateTimeFormat = (locale: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat => {
  const key = `${locale} ${JSON.stringify(options)}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.DateTimeFormat(locale, options);
  formatters.set(key, made);
  return made;
};

/** A moment in the chain's time zone: "1 Dec 2026, 10:42". */
export const formatMoment = (instant: string | Date | null | undefined, options: InstantOptions = {}): string => {
  if (!instant) return missing;
  const { timeZone, locale = "en-GB" } = options;
  return dateTimeFormat(locale, { dateStyle: "medium", timeStyle: "short", timeZone }).format(new Date(instant));
};

/** "10:42" in the chain's time zone. */
export const formatTimeOfDay = (instant: string | Date, options: InstantOptions = {}): string =>
  dateTimeFormat(options.locale ?? "en-GB", { timeStyle: "short", timeZone: options.timeZone }).format(
    new Date(instant),
  );

/** Time left, as precise as it deserves: "a few seconds", "40 seconds", "3 minutes", "2 hours". */
export const formatDuration = (seconds: number): string => {
  if (!Number.isFinite(seconds)) return missing;
  if (seconds < 8) return "a few seconds";
  if (seconds < 55) return `${Math.round(seconds / 10) * 10 || 10} seconds`;
  if (seconds < 90) return "a minute";
  if (seconds < 5400) return `${Math.round(seconds / 60)} minutes`;
  return `${Math.round(seconds / 3600)} hours`;
};
