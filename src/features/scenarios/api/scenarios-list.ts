import { infiniteQueryOptions } from "@tanstack/react-query";
import { listScenarios } from "@shared/contract/scenarios";
import type { ResponseOf } from "@shared/contract/endpoint";
import { call } from "@/lib/api-client";

export type ScenarioListItem = ResponseOf<typeof listScenarios>["items"][number];

/** Scenarios, last changed first, a page at a time. */
export const scenariosQuery = () =>
  infiniteQueryOptions({
    queryKey: ["scenarios"],
    queryFn: ({ pageParam, signal }) =>
      call(listScenarios, { query: { limit: 100, ...(pageParam !== null && { cursor: pageParam }) }, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.nextCursor,
  });
