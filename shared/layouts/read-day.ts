import type { DateOrder } from "../contract/layouts";
import { dayFromNumber, isDay } from "../calendar";
import { monthOf } from "./month-names";

/** A text read as a day: a day "YYYY-MM-DD", an ISO week "YYYY-Www", or why it is neither. */
export type DayReading = { day: string } | { isoWeek: string } | { problem: string };

const time = /[T ]\d{1,2}:\d{2}(?::\d{2}(?:\.\d+)?)?(?:Z|[+-]\d{2}:?\d{2})?(?: ?[AP]M)?$/i;
const yearFirst = /^(\d{4})([-/.])(\d{1,2})\2(\d{1,2})\.?$/;
const compact = /^((?:19|20)\d{2})(\d{2})(\d{2})$/;
const yearLast = /^(\d{1,2})([-/. ])(\d{1,2})\2(\d{4}|\d{2})$/;
const named = /^(\d{1,2})[-/. ]{1,2}(\p{L}{3,12})[-/. ]{1,2}(\d{4}|\d{2})$/u;
const weekOfYear = /^(\d{4})[- ]?(?:W|KW|S) ?(\d{1,2})$/i;
const weekThenYear = /^(?:W|KW|WK|S) ?(\d{1,2})[-/. ]{1,2}(\d{4})$/i;
/** Day numbers of spreadsheets from 1954 to 2064. */
const serial = /^[2-5]\d{4}(?:\.0+)?$/;
/** Two digits from here on are meant as years of the last century. */
const firstOldYear = 70;
/** No chain has older days, and counting from them stays within the calendar. */
const earliestYear = 1000;

/** The three numbers of a day whose year stands last; which of the first two is the month, the order says. */
export type YearLast = { first: number; second: number; year: number; sign: string };

/**
 * The numbers of a day whose year stands last, or null where a text is no such thing.
 *
 * @example yearLastParts("7/6/26") // { first: 7, second: 6, year: 2026, sign: "/" }
 */
export function yearLastParts(text: string): YearLast | null {
  const parts = yearLast.exec(text.trim().replace(time, ""));
  if (!parts) return null;
  return { first: Number(parts[1]), second: Number(parts[3]), year: fullYear(parts[4] ?? ""), sign: parts[2] ?? "" };
}

/**
 * Reads a day or an ISO week. A time of day behind it is passed over. Years of two digits: 70 to 99 are 1970 to 1999.
 *
 * @example readDay("07.06.2026", "dmy") // { day: "2026-06-07" }
 */
export function readDay(text: string, order: DateOrder): DayReading {
  const value = text.trim().replace(time, "");
  const iso = yearFirst.exec(value);
  if (iso) return dayOrProblem(Number(iso[1]), Number(iso[3]), Number(iso[4]));
  const digits = compact.exec(value);
  if (digits) return dayOrProblem(Number(digits[1]), Number(digits[2]), Number(digits[3]));
  const week = weekOfYear.exec(value);
  if (week) return isoWeek(week[1] ?? "", week[2] ?? "");
  const turned = weekThenYear.exec(value);
  if (turned) return isoWeek(turned[2] ?? "", turned[1] ?? "");
  const words = named.exec(value);
  const month = words && monthOf(words[2] ?? "");
  if (month) return dayOrProblem(fullYear(words[3] ?? ""), month, Number(words[1]));
  return readYearLast(value, order);
}

/** "202624", which is a week only where one is expected. */
const yearAndWeek = /^(20\d{2})(0[1-9]|[1-4]\d|5[0-3])$/;

/**
 * Reads a value of a column of weeks: as `readDay`, and a year with the number of an ISO week behind it.
 *
 * @example readWeek("202624", "iso") // { isoWeek: "2026-W24" }
 */
export function readWeek(text: string, order: DateOrder): DayReading {
  const parts = yearAndWeek.exec(text.trim());
  return parts ? isoWeek(parts[1] ?? "", parts[2] ?? "") : readDay(text, order);
}

/** Whether a text is a year with the number of a week behind it. */
export const isYearAndWeek = (text: string): boolean => yearAndWeek.test(text.trim());

function readYearLast(value: string, order: DateOrder): DayReading {
  const parts = yearLastParts(value);
  if (!parts) return { problem: serial.test(value) ? serialProblem(value) : "The value is not a day" };
  if (order === "iso") return { problem: "The layout says that days begin with the year" };
  const [date, month] = order === "dmy" ? [parts.first, parts.second] : [parts.second, parts.first];
  const reading = dayOrProblem(parts.year, month, date);
  const other = month > 12 && date <= 12 ? `; the layout says that the ${order === "dmy" ? "day" : "month"} comes first` : "";
  return "problem" in reading ? { problem: `${reading.problem}${other}` } : reading;
}

function serialProblem(value: string): string {
  return `The value is a spreadsheet's day number, ${serialDay(value)} if counted from 1900; format the column as dates there`;
}

/** Whether a text can be a spreadsheet's day number of the years 1954 to 2064. */
export const isSerialDay = (text: string): boolean => serial.test(text.trim());

/** Day 25,569 of a spreadsheet is 1970-01-01. */
function serialDay(value: string): string {
  return dayFromNumber(Math.trunc(Number(value)) - 25_569);
}

function dayOrProblem(year: number, month: number, date: number): DayReading {
  const day = [String(year).padStart(4, "0"), ...[month, date].map((part) => String(part).padStart(2, "0"))].join("-");
  return year >= earliestYear && isDay(day) ? { day } : { problem: "There is no such day in the calendar" };
}

function isoWeek(year: string, week: string): DayReading {
  const number = Number(week);
  if (number < 1 || number > 53) return { problem: "Weeks of a year are numbered from 1 to 53" };
  return { isoWeek: `${year}-W${week.padStart(2, "0")}` };
}

function fullYear(text: string): number {
  const year = Number(text);
  if (text.length > 2) return year;
  return year + (year >= firstOldYear ? 1900 : 2000);
}

/** Whether a text is a day or an ISO week under one order or another. */
export function isDayLike(text: string): boolean {
  return (["dmy", "mdy"] as const).some((order) => !("problem" in readDay(text, order)));
}
