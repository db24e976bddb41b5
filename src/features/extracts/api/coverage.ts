import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { getCoverage } from "@shared/contract/coverage";
import { call } from "@/lib/api-client";

export const coverageKey = ["coverage"];

const askAgainMs = 2000;

/** Store by week, up to a week; asked for again while a file just loaded is not counted in yet. */
export const coverageQuery = ({ until, weeks }: { until: string | null; weeks: number }) =>
  queryOptions({
    queryKey: [...coverageKey, until, weeks],
    queryFn: ({ signal }) => call(getCoverage, { query: { until: until ?? undefined, weeks }, signal }),
    placeholderData: keepPreviousData,
    refetchInterval: ({ state }) => (state.data?.isBehind ? askAgainMs : false),
  });
