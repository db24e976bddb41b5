import type { QueryClient } from "@tanstack/react-query";
import { DriversPage } from "@/features/drivers/components/drivers-page";
import { productsQuery, storesQuery } from "@/lib/catalogue";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(productsQuery());
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const DriversRoute = () => <DriversPage />;
