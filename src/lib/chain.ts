import { queryOptions, useQuery } from "@tanstack/react-query";
import { getChain } from "@shared/contract/chain";
import type { Chain } from "@shared/contract/chain";
import { call } from "./api-client";

export const chainQuery = () =>
  queryOptions({ queryKey: ["chain"], queryFn: ({ signal }) => call(getChain, { signal }), staleTime: 5 * 60_000 });

export const useChain = (): Chain | undefined => useQuery(chainQuery()).data;
