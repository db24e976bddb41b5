import type { QueryClient } from "@tanstack/react-query";
import { StoresPage } from "@/features/catalogue/components/stores-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { storesQuery } from "@/lib/catalogue";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const CatalogueStoresRoute = () => (
  <>
    <ExtractsViews />
    <StoresPage />
  </>
);
