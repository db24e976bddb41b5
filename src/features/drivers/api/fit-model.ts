import { useMutation, useQueryClient } from "@tanstack/react-query";
import { z } from "zod";
import { createModel, modelAcceptedSchema } from "@shared/contract/drivers";
import { call } from "@/lib/api-client";
import { modelsQuery } from "./models";

/** A product sold in one store only is fitted at once; otherwise the answer names the job. */
const fitEndpoint = {
  ...createModel,
  response: z.union([modelAcceptedSchema, createModel.response ?? modelAcceptedSchema]),
};

/** Fits a product anew in all its stores; gives the job to watch, or null where it is done already. */
export const useFitModel = (product: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: async () => {
      const answer = await call(fitEndpoint, { body: { product } });
      return "jobId" in answer ? answer.jobId : null;
    },
    onSuccess: () => queryClient.invalidateQueries({ queryKey: modelsQuery(product).queryKey }),
  });
};
