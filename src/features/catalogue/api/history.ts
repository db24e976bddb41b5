import { infiniteQueryOptions } from "@tanstack/react-query";
import { listCatalogueHistory, type HistoryKind } from "@shared/contract/catalogue-history";
import { call } from "@/lib/api-client";

const pageSize = 50;

/** Who changed what, newest first: of one code, or of everything of a kind. */
export const historyQuery = (kind: HistoryKind, code?: string) =>
  infiniteQueryOptions({
    queryKey: ["catalogue-history", kind, code ?? null],
    queryFn: ({ pageParam, signal }) => call(listCatalogueHistory, { query: { kind, code, limit: pageSize, cursor: pageParam }, signal }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });
