import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { getSalesWeeks } from "@shared/contract/drivers";
import { call } from "@/lib/api-client";

export const salesWeeksQuery = (product: string, store: string) =>
  queryOptions({
    queryKey: ["sales", product, store],
    queryFn: async ({ signal }) => (await call(getSalesWeeks, { query: { product, store }, signal })).items,
    enabled: product !== "" && store !== "",
    placeholderData: keepPreviousData,
  });
