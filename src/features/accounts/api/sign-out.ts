import { useMutation, useQueryClient } from "@tanstack/react-query";
import { signOut } from "@shared/contract/accounts";
import { call } from "@/lib/api-client";
import { forgetOthersData, sessionQuery, signedOutKey } from "@/lib/session";

export const useSignOut = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(signOut, {}),
    onSuccess: () => {
      forgetOthersData(queryClient);
      queryClient.setQueryData(signedOutKey, true);
      queryClient.setQueryData(sessionQuery().queryKey, null);
    },
  });
};
