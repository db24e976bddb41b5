import { useChain } from "./chain";
import { neutralSettings } from "./format/chain-format";

/** Today's date where the chain is, YYYY-MM-DD (the Swedish form of dates is ISO 8601's). */
export const useChainDay = (): string => {
  const { timeZone } = useChain() ?? neutralSettings;
  return new Intl.DateTimeFormat("sv-SE", { timeZone, dateStyle: "short" }).format(new Date());
};
