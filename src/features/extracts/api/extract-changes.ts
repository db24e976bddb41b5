import { queryOptions } from "@tanstack/react-query";
import { getExtractChanges } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";
import { extractQuery } from "./extract";

export const extractChangesQuery = (id: string) =>
  queryOptions({
    queryKey: [...extractQuery(id).queryKey, "changes"],
    queryFn: ({ signal }) => call(getExtractChanges, { params: { id }, signal }),
  });
