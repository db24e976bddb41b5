import { useQuery } from "@tanstack/react-query";
import { useChainFormat } from "@/lib/format/chain-format";
import { loadedWeeksQuery } from "../api/loaded-weeks";
import { loadedWeeksLine } from "../view/loaded-weeks";

/** Over the list of extracts: which week is expected next, and which are missing. */
export const LoadedWeeksLine = () => {
  const format = useChainFormat();
  const weeks = useQuery(loadedWeeksQuery());
  const line = weeks.isError ? "Which week is expected next could not be read." : weeks.data && loadedWeeksLine(weeks.data, format);
  return line ? <p className="border-b border-hairline px-5 py-3">{line}</p> : null;
};
