import { queryOptions } from "@tanstack/react-query";
import { getExtractChanges } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";

export const extractChangesKey = (id: string) => ["extract", id, "changes"];

export const extractChangesQuery = (id: string) =>
  queryOptions({
    queryKey: extractChangesKey(id),
    queryFn: ({ signal }) => call(getExtractChanges, { params: { id }, signal }),
  });
