import { queryOptions } from "@tanstack/react-query";
import { listModels } from "@shared/contract/drivers";
import { call } from "@/lib/api-client";

export const modelsQuery = (product: string) =>
  queryOptions({
    queryKey: ["models", product],
    queryFn: async ({ signal }) => (await call(listModels, { query: { product }, signal })).items,
    enabled: product !== "",
  });
