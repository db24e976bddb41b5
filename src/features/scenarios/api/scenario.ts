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

/** What someone else saved meanwhile: asked for apart, so that the page's own draft does not change under a person's hands. */
export const theirScenarioQuery = (id: string) =>
  queryOptions({
    queryKey: ["scenario", id, "theirs"],
    queryFn: ({ signal }) => call(getScenario, { params: { id }, signal }),
    staleTime: 0,
    gcTime: 0,
  });
