import { useQueryClient } from "@tanstack/react-query";
import { useCallback } from "react";

/** Asks again for what a change of the catalogue may have touched, by the first word of its keys; the history always. */
export const useRefresh = () => {
  const queryClient = useQueryClient();
  return useCallback(
    (...things: string[]) =>
      queryClient.invalidateQueries({
        predicate: ({ queryKey }) => queryKey[0] === "catalogue-history" || things.includes(String(queryKey[0])),
      }),
    [queryClient],
  );
};
