import type { Chain } from "@shared/contract/chain";
import type { ChainRow } from "./chain.entities";

export function presentChain(row: ChainRow): Chain {
  const { name, currency, locale, timeZone, calendar, weekStart, temperatureUnit, intervalLevel, uploadLimitBytes } =
    row;
  const { secondLookShare, salesDueDay, salesDueHour } = row;
  return {
    name, currency, locale, timeZone, calendar, weekStart, temperatureUnit, intervalLevel, uploadLimitBytes,
    secondLookShare, salesDueDay, salesDueHour,
  };
}
