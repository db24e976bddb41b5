import { useMutation, useQueryClient } from "@tanstack/react-query";
import { checkExtract, loadExtract, withdrawExtract } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";
import { extractChangesKey } from "./extract-changes";
import { extractQuery } from "./extract";
import { extractIssuesKey } from "./extract-issues";

const endpoints = { check: checkExtract, withdraw: withdrawExtract };
export type ExtractAction = "check" | "load" | "withdraw";

/** Starts a check, a load or a withdrawal; each goes on in the background. */
export const useExtractAction = (id: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (action: ExtractAction) =>
      action === "load" ? call(loadExtract, { params: { id }, body: {} }) : call(endpoints[action], { params: { id } }),
    onSettled: () => queryClient.invalidateQueries({ queryKey: extractQuery(id).queryKey }),
  });
};

/** After a job has ended: everything the extract's page shows, the list, and all that a load changes. */
export const useRefreshExtract = (id: string) => {
  const queryClient = useQueryClient();
  return () =>
    Promise.all(
      [
        extractQuery(id).queryKey,
        extractIssuesKey(id),
        extractChangesKey(id),
        ["extracts"],
        ["loaded-weeks"],
        ["products"],
        ["stores"],
      ].map((queryKey) => queryClient.invalidateQueries({ queryKey })),
    );
};
