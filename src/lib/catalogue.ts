import { queryOptions } from "@tanstack/react-query";
import { listProducts, listStores } from "@shared/contract/catalogue";
import { call } from "./api-client";

const staleTime = 5 * 60_000;

/** All products, in the order of their names. Reference data that every page picks from. */
export const productsQuery = () =>
  queryOptions({
    queryKey: ["products"],
    queryFn: async ({ signal }) => (await call(listProducts, { signal })).items,
    staleTime,
  });

/** All stores, in the order of their names. */
export const storesQuery = () =>
  queryOptions({
    queryKey: ["stores"],
    queryFn: async ({ signal }) => (await call(listStores, { signal })).items,
    staleTime,
  });
