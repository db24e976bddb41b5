import { queryOptions } from "@tanstack/react-query";
import { getLoadedWeeks } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";

export const loadedWeeksQuery = () =>
  queryOptions({ queryKey: ["loaded-weeks"], queryFn: ({ signal }) => call(getLoadedWeeks, { signal }) });
