import { CalendarError, requireChainCalendar } from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";
import type { Chain } from "@shared/contract/chain";

type Fault = { path: keyof Chain; message: string };

/** What is wrong with settings that each look right; empty where they can be used. */
export function chainFaults(
  chain: Pick<Chain, "timeZone" | "locale" | "currency" | "calendar" | "weekStart">,
): Fault[] {
  const faults: Fault[] = [];
  if (!isTimeZone(chain.timeZone)) {
    faults.push({ path: "timeZone", message: `${chain.timeZone} is no time zone. Give a name such as Europe/London.` });
  }
  if (!isLocale(chain.locale)) {
    faults.push({
      path: "locale",
      message: `${chain.locale} is no language tag that numbers can be written by. Give one such as en-GB.`,
    });
  }
  if (!Intl.supportedValuesOf("currency").includes(chain.currency)) {
    faults.push({
      path: "currency",
      message: `${chain.currency} is no currency. Give its three letters, for example EUR.`,
    });
  }
  const calendarFault = faultOfCalendar(chain);
  if (calendarFault) faults.push({ path: "weekStart", message: calendarFault });
  return faults;
}

function faultOfCalendar({ calendar, weekStart }: Pick<Chain, "calendar" | "weekStart">): string | null {
  try {
    requireChainCalendar({ kind: calendar, weekStart: weekStart as WeekStart });
    return null;
  } catch (error) {
    if (error instanceof CalendarError) return error.message;
    throw error;
  }
}

function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat("en", { timeZone: name });
    return true;
  } catch {
    return false;
  }
}

function isLocale(tag: string): boolean {
  try {
    return Intl.NumberFormat.supportedLocalesOf([tag]).length === 1;
  } catch {
    return false;
  }
}
