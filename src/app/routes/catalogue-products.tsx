import type { QueryClient } from "@tanstack/react-query";
import { ProductsPage } from "@/features/catalogue/components/products-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { productsQuery } from "@/lib/catalogue";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(productsQuery());
  return null;
};

export const CatalogueProductsRoute = () => (
  <>
    <ExtractsViews />
    <ProductsPage />
  </>
);
