import { useMutation, useQueryClient } from "@tanstack/react-query";
import { changePassword } from "@shared/contract/accounts";
import type { BodyOf } from "@shared/contract/endpoint";
import { call } from "@/lib/api-client";
import { sessionQuery } from "@/lib/session";

export const useChangePassword = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof changePassword>) => call(changePassword, { body }),
    onSuccess: () => queryClient.invalidateQueries(sessionQuery()),
  });
};
