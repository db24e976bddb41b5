import { queryOptions } from "@tanstack/react-query";
import { listCheckRules } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";

/** What a file is checked for; it changes with the product only. */
export const checkRulesQuery = () =>
  queryOptions({
    queryKey: ["check-rules"],
    queryFn: async ({ signal }) => (await call(listCheckRules, { signal })).items,
    staleTime: Infinity,
  });
