import { queryOptions } from "@tanstack/react-query";
import { getExtract } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";

/** What else is asked of an extract has a key that begins with this one, and is read anew with it. */
export const extractQuery = (id: string) =>
  queryOptions({
    queryKey: ["extract", id],
    queryFn: ({ signal }) => call(getExtract, { params: { id }, signal }),
    staleTime: 5000,
  });
