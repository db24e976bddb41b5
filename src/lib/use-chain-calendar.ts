import { useMemo } from "react";
import { parseWeekStart, type ChainCalendar } from "@shared/calendar";
import { useChain } from "./chain";
import { neutralSettings } from "./format/chain-format";

/** How the chain counts its weeks. */
export const useChainCalendar = (): ChainCalendar => {
  const { calendar: kind, weekStart } = useChain() ?? neutralSettings;
  return useMemo(() => ({ kind, weekStart: parseWeekStart(weekStart) }), [kind, weekStart]);
};
