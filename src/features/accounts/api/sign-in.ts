import { useMutation, useQueryClient } from "@tanstack/react-query";
import { signIn } from "@shared/contract/accounts";
import type { BodyOf } from "@shared/contract/endpoint";
import { call } from "@/lib/api-client";
import { sessionQuery } from "@/lib/session";

export const useSignIn = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof signIn>) => call(signIn, { body }),
    onSuccess: (session) => {
      // Whatever another person has left in memory goes first.
      queryClient.clear();
      queryClient.setQueryData(sessionQuery().queryKey, session);
    },
  });
};
