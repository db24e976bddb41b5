import { useMutation, useQueryClient } from "@tanstack/react-query";
import { signIn } from "@shared/contract/accounts";
import type { BodyOf } from "@shared/contract/endpoint";
import { call } from "@/lib/api-client";
import { forgetOthersData, sessionQuery } from "@/lib/session";

export const useSignIn = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof signIn>) => call(signIn, { body }),
    onSuccess: (session) => {
      forgetOthersData(queryClient);
      queryClient.setQueryData(sessionQuery().queryKey, session);
    },
  });
};
