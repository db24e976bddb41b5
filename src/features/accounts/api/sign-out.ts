import { useMutation, useQueryClient } from "@tanstack/react-query";
import { signOut } from "@shared/contract/accounts";
import { call } from "@/lib/api-client";
import { forgetOthersData, sessionQuery } from "@/lib/session";

/** Signs out and leaves the page by `leave`, which the person's own data outlive only until it is done. */
export const useSignOut = (leave: () => void | Promise<void>) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(signOut, {}),
    onSuccess: async () => {
      // First away: a page that loses its session on its own brings the next person back to it.
      await leave();
      forgetOthersData(queryClient);
      queryClient.setQueryData(sessionQuery().queryKey, null);
    },
  });
};
