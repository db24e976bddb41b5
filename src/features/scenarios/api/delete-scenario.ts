import { useMutation, useQueryClient } from "@tanstack/react-query";
import { deleteScenario } from "@shared/contract/scenarios";
import { call } from "@/lib/api-client";
import { scenariosQuery } from "./scenarios-list";

export const useDeleteScenario = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => call(deleteScenario, { params: { id } }),
    onSuccess: (_, id) => {
      queryClient.removeQueries({ queryKey: ["scenario", id] });
      void queryClient.invalidateQueries({ queryKey: scenariosQuery().queryKey });
    },
  });
};
