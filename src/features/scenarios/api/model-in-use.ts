import { queryOptions } from "@tanstack/react-query";
import { listModels } from "@shared/contract/drivers";
import { call } from "@/lib/api-client";

/** The product's model in use now; null where none is. */
export const modelInUseQuery = (product: string) =>
  queryOptions({
    queryKey: ["model-in-use", product],
    queryFn: async ({ signal }) => (await call(listModels, { query: { product, state: "in-use" }, signal })).items[0] ?? null,
  });
