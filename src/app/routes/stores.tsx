import type { QueryClient } from "@tanstack/react-query";
import { StoresPage } from "@/features/stores/components/stores-page";
import { productsQuery } from "@/lib/catalogue";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(productsQuery());
  return null;
};

export const StoresRoute = () => <StoresPage />;
