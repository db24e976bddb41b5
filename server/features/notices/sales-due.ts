import { addDays, addWeeks, firstDayOfWeek, type Day, type WeekStart } from "@shared/calendar";
import type { Chain } from "@shared/contract/chain";
import { dayIn, hourIn } from "../chain";

type DueSettings = Pick<Chain, "timeZone" | "weekStart" | "salesDueDay" | "salesDueHour">;

/** The week whose sales are due next or were due last, the day on which they are, and whether that hour has come. */
export type SalesDue = { week: Day; dueOn: Day; isOver: boolean };

/**
 * By when the sales of the week that ended last are due, where the chain is: on the first such day of the week after. The
 * clock on the wall counts, so that an hour which a change of time leaves out has come with the next.
 */
export function salesDue({ timeZone, weekStart, salesDueDay, salesDueHour }: DueSettings, now: Date): SalesDue {
  const today = dayIn(timeZone, now);
  const thisWeek = firstDayOfWeek(today, weekStart as WeekStart);
  const dueOn = addDays(thisWeek, (salesDueDay - weekStart + 7) % 7);
  const isOver = today > dueOn || (today === dueOn && hourIn(timeZone, now) >= salesDueHour);
  return { week: addWeeks(thisWeek, -1), dueOn, isOver };
}
