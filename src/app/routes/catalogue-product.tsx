import type { QueryClient } from "@tanstack/react-query";
import { useNavigate, useParams, type LoaderFunctionArgs } from "react-router-dom";
import { fundingQuery } from "@/features/catalogue/api/funding";
import { listingsQuery } from "@/features/catalogue/api/listings";
import { termsQuery } from "@/features/catalogue/api/terms";
import { ProductPage } from "@/features/catalogue/components/product-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { productsQuery, storesQuery } from "@/lib/catalogue";
import { paths } from "@/lib/paths";
import { useChainDay } from "@/lib/use-chain-day";

export const loaderFor = (queryClient: QueryClient) => ({ params }: LoaderFunctionArgs) => {
  const code = params.productCode ?? "";
  void queryClient.prefetchQuery(productsQuery());
  void queryClient.prefetchQuery(storesQuery());
  void queryClient.prefetchQuery(termsQuery(code));
  void queryClient.prefetchQuery(fundingQuery(code));
  void queryClient.prefetchQuery(listingsQuery(code));
  return null;
};

export const CatalogueProductRoute = () => {
  const { productCode = "" } = useParams();
  const navigate = useNavigate();
  const today = useChainDay();
  return (
    <>
      <ExtractsViews />
      <ProductPage key={productCode} code={productCode} today={today} onRemoved={() => void navigate(paths.catalogueProducts.href())} />
    </>
  );
};
