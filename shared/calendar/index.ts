export { CalendarError } from "./calendar-error";
export type { CalendarErrorCode } from "./calendar-error";
export { parseWeek, requireChainCalendar, weekLabel, weekNumberOf } from "./chain-calendar";
export type { ChainCalendar } from "./chain-calendar";
export { addDays, dayFromNumber, dayNumber, dayOfWeek, dayOfYear, daysInYear, isDay, yearOf } from "./day";
export type { Day } from "./day";
export { isoWeekMonday, isoWeekOf, isoWeeksInYear } from "./iso-week";
export type { WeekNumber } from "./iso-week";
export { retailWeekOf, retailWeekSunday, retailWeeksInYear, retailYearStart } from "./retail-week";
export type { RetailWeek } from "./retail-week";
export {
  addWeeks,
  firstDayOfWeek,
  lastDayOfWeek,
  middleDayOfWeek,
  weekFromIndex,
  weekIndex,
  weeksApart,
  weeksBetween,
} from "./week";
export { parseWeekStart, weekdayNames } from "./week-start";
export type { WeekdayName, WeekStart } from "./week-start";
export { yearFraction } from "./year-fraction";
