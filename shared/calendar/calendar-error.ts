/** What can be wrong with a date, a week or a calendar setting. */
export type CalendarErrorCode =
  | "not-a-day"
  | "not-a-week"
  | "not-a-first-day"
  | "week-number-needs-iso"
  | "no-such-week"
  | "unknown-week-start"
  | "calendar-and-week-start-disagree"
  | "not-whole-weeks"
  | "too-many-weeks";

/**
 * The one error that calendar functions throw: a code for programs and a sentence for people that names the value and the rule.
 *
 * @example new CalendarError("not-a-day", '"2026-02-30" is not a day of the calendar.')
 */
export class CalendarError extends Error {
  readonly code: CalendarErrorCode;

  constructor(code: CalendarErrorCode, message: string) {
    super(message);
    this.name = "CalendarError";
    this.code = code;
  }
}
