import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { getComparison } from "@shared/contract/comparisons";
import { call } from "@/lib/api-client";

type ComparisonOf = { product: string; driver: string; level: number; anchor?: number };

/** One driver's curve of a product for all its stores. The one before stays until the next has come. */
export const comparisonQuery = (of: ComparisonOf) =>
  queryOptions({
    queryKey: ["comparison", of],
    queryFn: ({ signal }) => call(getComparison, { query: { ...of, points: 81 }, signal }),
    enabled: of.product !== "",
    placeholderData: keepPreviousData,
  });
