import { useMutation, useQueryClient } from "@tanstack/react-query";
import { checkExtract, loadExtract, withdrawExtract } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";
import { coverageKey } from "./coverage";
import { extractQuery } from "./extract";

/** What can be started on an extract; a load that is unusual must say that a person has looked at it. */
export type ExtractAction = { name: "check" | "withdraw" } | { name: "load"; secondLook: boolean };

const start = (id: string, action: ExtractAction) => {
  const params = { id };
  if (action.name === "load") return call(loadExtract, { params, body: { secondLook: action.secondLook } });
  return call(action.name === "check" ? checkExtract : withdrawExtract, { params });
};

/** Starts a check, a load or a withdrawal; each goes on in the background. */
export const useExtractAction = (id: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (action: ExtractAction) => start(id, action),
    // All of the extract is read anew, also its changes: a refused load may have learnt reasons for a second look since.
    onSettled: () => queryClient.invalidateQueries({ queryKey: extractQuery(id).queryKey }),
  });
};

/** After a job has ended: everything the extract's page shows, the list, and all that a load changes. */
export const useRefreshExtract = (id: string) => {
  const queryClient = useQueryClient();
  return () =>
    Promise.all(
      [extractQuery(id).queryKey, ["extracts"], coverageKey, ["loaded-weeks"], ["products"], ["stores"]].map((queryKey) =>
        queryClient.invalidateQueries({ queryKey }),
      ),
    );
};
