import { useMutation, useQueryClient } from "@tanstack/react-query";
import { putChain } from "@shared/contract/chain";
import type { BodyOf } from "@shared/contract/endpoint";
import { call } from "@/lib/api-client";
import { chainQuery } from "@/lib/chain";

/** What is shown anywhere may be written by the chain's settings, so all else is asked for again. */
export const useChangeChain = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof putChain>) => call(putChain, { body }),
    onSuccess: async (chain) => {
      queryClient.setQueryData(chainQuery().queryKey, chain);
      await queryClient.invalidateQueries({ predicate: ({ queryKey }) => !["chain", "session"].includes(String(queryKey[0])) });
    },
  });
};
