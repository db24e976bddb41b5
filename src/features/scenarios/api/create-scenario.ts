import { useMutation, useQueryClient } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { createScenario } from "@shared/contract/scenarios";
import { call } from "@/lib/api-client";
import { scenarioQuery } from "./scenario";
import { scenariosQuery } from "./scenarios-list";

export const useCreateScenario = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof createScenario>) => call(createScenario, { body }),
    onSuccess: (scenario) => {
      queryClient.setQueryData(scenarioQuery(scenario.id).queryKey, scenario);
      void queryClient.invalidateQueries({ queryKey: scenariosQuery().queryKey });
    },
  });
};
