import { infiniteQueryOptions } from "@tanstack/react-query";
import { listExtracts } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";
import { isInWork } from "../view/extract-state";

const pageSize = 100;
const watchEveryMs = 2500;

/** Extracts, newest first; asked for again while one of them is being checked or loaded. */
export const extractsQuery = () =>
  infiniteQueryOptions({
    queryKey: ["extracts"],
    queryFn: ({ pageParam, signal }) => call(listExtracts, { query: { limit: pageSize, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
    refetchInterval: ({ state }) =>
      state.data?.pages.some((page) => page.items.some(isInWork)) ? watchEveryMs : false,
  });
