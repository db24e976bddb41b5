import { createContext, useContext } from "react";
import type { Chain } from "@shared/contract/chain";
import { weekNumberOf } from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";
import { formatDay, formatMoment, formatTimeOfDay, formatWeekDays } from "./date";
import { formatMoney, formatPrice } from "./money";
import { formatMultiplier, formatNumber, formatUnits } from "./number";
import { formatPercent } from "./percent";
import { formatDegrees, formatTemperature } from "./temperature";

type Settings = Pick<Chain, "currency" | "locale" | "timeZone" | "calendar" | "weekStart" | "temperatureUnit">;
type Amount = number | null | undefined;
type Signs = { signed?: boolean; digits?: number };

/** Stands in until the chain's own settings have come. */
export const neutralSettings: Settings = {
  currency: "EUR",
  locale: "en-GB",
  timeZone: "UTC",
  calendar: "iso",
  weekStart: 1,
  temperatureUnit: "celsius",
};

/** Every way a number or a date is written for this chain. */
export const createChainFormat = (settings: Settings) => {
  const { currency, locale, timeZone } = settings;
  const calendar = { kind: settings.calendar, weekStart: settings.weekStart as WeekStart };
  const weekNumber = (firstDay: string) => weekNumberOf(calendar, firstDay).week;
  return {
    number: (value: Amount, options: Signs = {}) => formatNumber(value, { locale, ...options }),
    units: (value: Amount, options: { signed?: boolean } = {}) => formatUnits(value, { locale, ...options }),
    multiplier: (value: Amount) => formatMultiplier(value, { locale }),
    percent: (share: Amount, options: Signs = {}) => formatPercent(share, { locale, ...options }),
    money: (amount: Amount, options: Signs = {}) => formatMoney(amount, { currency, locale, ...options }),
    price: (amount: Amount, options: { signed?: boolean } = {}) =>
      formatPrice(amount, { currency, locale, ...options }),
    temperature: (celsius: Amount) => formatTemperature(celsius, { unit: settings.temperatureUnit }),
    degrees: (celsius: number) => formatDegrees(celsius, settings.temperatureUnit),
    day: formatDay,
    moment: (instant: string | Date | null | undefined) => formatMoment(instant, { timeZone, locale }),
    timeOfDay: (instant: string | Date) => formatTimeOfDay(instant, { timeZone, locale }),
    /** "week 26" of the week that begins on a day, by the chain's calendar. */
    week: (firstDay: string) => `week ${weekNumber(firstDay)}`,
    weekNumber,
    /** The same with the year that the calendar counts it in. */
    weekNumberAndYear: (firstDay: string) => weekNumberOf(calendar, firstDay),
    /** "wk 24" and the year it is counted in, for the foot of a chart. */
    weekName: (firstDay: string) => {
      const { week, year } = weekNumberOf(calendar, firstDay);
      return { label: `wk ${week}`, year };
    },
    weekDays: formatWeekDays,
    /** "weeks 24–29, 2026" */
    weekSpan: (first: string, last: string) => {
      const from = weekNumberOf(calendar, first);
      const to = weekNumberOf(calendar, last);
      if (from.year !== to.year) return `week ${from.week}, ${from.year} – week ${to.week}, ${to.year}`;
      return from.week === to.week ? `week ${from.week}, ${from.year}` : `weeks ${from.week}–${to.week}, ${from.year}`;
    },
  };
};

export type ChainFormat = ReturnType<typeof createChainFormat>;

/** Given by the shell once the chain's settings are known. */
export const ChainFormatContext = createContext<ChainFormat>(createChainFormat(neutralSettings));

export const useChainFormat = (): ChainFormat => useContext(ChainFormatContext);
