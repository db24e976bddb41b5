import { useMutation, useQueryClient } from "@tanstack/react-query";
import * as contract from "@shared/contract/drivers";
import { call } from "@/lib/api-client";
import { modelsQuery } from "./models";

/** Puts a model in use in place of the one before. */
export const usePutModelInUse = (product: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => call(contract.useModel, { params: { id } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: modelsQuery(product).queryKey }),
  });
};
