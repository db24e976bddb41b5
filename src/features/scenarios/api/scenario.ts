import { queryOptions } from "@tanstack/react-query";
import { getScenario } from "@shared/contract/scenarios";
import { call } from "@/lib/api-client";

/** One saved scenario. The page keeps its own draft of it, so it is not fetched again behind a person's back. */
export const scenarioQuery = (id: string) =>
  queryOptions({
    queryKey: ["scenario", id],
    queryFn: ({ signal }) => call(getScenario, { params: { id }, signal }),
    refetchOnWindowFocus: false,
    staleTime: 0,
  });
