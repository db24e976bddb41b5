import { useQuery } from "@tanstack/react-query";
import { Pencil } from "lucide-react";
import { useState } from "react";
import type { Product } from "@shared/contract/catalogue";
import { Button } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { LinkButton } from "@/components/ui/link-button";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { TextLink } from "@/components/ui/text-link";
import { productsQuery } from "@/lib/catalogue";
import { paths } from "@/lib/paths";
import { usePermission } from "@/lib/session";
import { CatalogueViews } from "./catalogue-views";
import { ChangeHistory } from "./change-history";
import { FundingSheet } from "./funding-sheet";
import { ListingsSheet } from "./listings-sheet";
import { ProductDialog } from "./product-dialog";
import { TermsSheet } from "./terms-sheet";

type ProductPageProps = { code: string; today: string; onRemoved: () => void };

/** All that the catalogue says of a product. */
export const ProductPage = (props: ProductPageProps) => {
  const query = useQuery(productsQuery());
  return (
    <QueryView query={query} loading="Reading the product" failure="The product could not be read">
      {(products) => {
        const product = products.find(({ code }) => code === props.code);
        return product ? <ProductSheets {...props} product={product} products={products} /> : <NoProduct code={props.code} />;
      }}
    </QueryView>
  );
};

const NoProduct = ({ code }: { code: string }) => (
  <>
    <PageHeader title="No such product" />
    <CatalogueViews />
    <Sheet><EmptyState title={`There is no product ${code}`}><TextLink to={paths.catalogueProducts.href()}>See all products</TextLink></EmptyState></Sheet>
  </>
);

type ProductSheetsProps = ProductPageProps & { product: Product; products: readonly Product[] };

const ProductSheets = ({ product, products, today, onRemoved }: ProductSheetsProps) => {
  const mayWrite = usePermission("catalogue:write");
  const [isChanging, setIsChanging] = useState(false);
  return (
    <>
      <PageHeader
        title={product.name} facts={factsOf(product, products)}
        actions={
          <>
            <LinkButton to={paths.drivers.href({ product: product.code })}>See its drivers</LinkButton>
            {mayWrite && <Button tone="primary" onClick={() => setIsChanging(true)}><Pencil aria-hidden="true" /> Change</Button>}
          </>
        }
      />
      <CatalogueViews />
      <div className="grid items-start gap-4 lg:grid-cols-2">
        <div className="flex min-w-0 flex-col gap-4">
          <TermsSheet product={product} today={today} mayWrite={mayWrite} />
          <FundingSheet product={product.code} mayWrite={mayWrite} />
        </div>
        <div className="flex min-w-0 flex-col gap-4">
          <ListingsSheet product={product.code} mayWrite={mayWrite} />
          <Sheet heading="Who changed what">
            <div className="max-h-[420px] overflow-y-auto" role="region" aria-label="Who changed what" tabIndex={0}><ChangeHistory kind="product" code={product.code} /></div>
          </Sheet>
        </div>
      </div>
      {isChanging && <ProductDialog product={product} products={products} onClose={() => setIsChanging(false)} onRemoved={onRemoved} />}
    </>
  );
};

const factsOf = ({ code, gtin, brand, categoryName, soldByWeight, replaces, replacesSizeRatio }: Product, products: readonly Product[]) => [
  code, categoryName,
  ...(brand === null ? [] : [brand]),
  ...(gtin === null ? [] : [`GTIN ${gtin}`]),
  ...(soldByWeight ? ["sold by weight"] : []),
  ...(replaces === null ? [] : [<>replaces <TextLink to={paths.catalogueProduct.href(replaces)}>{replaces}</TextLink> at a size ratio of {replacesSizeRatio}</>]),
  ...products.filter((other) => other.replaces === code).map((other) => <>replaced by <TextLink to={paths.catalogueProduct.href(other.code)}>{other.code}</TextLink></>),
];
