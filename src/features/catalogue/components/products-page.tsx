import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import type { Product } from "@shared/contract/catalogue";
import { exportFunding } from "@shared/contract/catalogue-funding";
import { exportListings } from "@shared/contract/catalogue-listings";
import { exportProducts } from "@shared/contract/catalogue-products";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SelectField } from "@/components/ui/select-field";
import { Sheet } from "@/components/ui/sheet";
import { TextField } from "@/components/ui/text-field";
import { TextLink } from "@/components/ui/text-link";
import { productsQuery } from "@/lib/catalogue";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { paths } from "@/lib/paths";
import { usePermission } from "@/lib/session";
import { useFilters } from "@/lib/use-filters";
import { exactMoney, taxWords } from "../view/product-words";
import { holdsWords } from "../view/search";
import { CatalogueActions } from "./catalogue-actions";
import { CatalogueViews } from "./catalogue-views";
import { CategoryName } from "./category-name";
import { KindHistory } from "./change-history";
import { ProductDialog } from "./product-dialog";

const columnsOf = (format: ChainFormat): TableColumn<Product>[] => [
  { id: "code", header: "Code", value: ({ code }) => code, width: "6rem" },
  {
    id: "name", header: "Name", value: ({ name }) => name,
    cell: ({ code, name }) => <TextLink to={paths.catalogueProduct.href(code)}>{name}</TextLink>,
  },
  { id: "category", header: "Category", value: ({ categoryName }) => categoryName, from: "sm" },
  { id: "brand", header: "Brand", value: ({ brand }) => brand, from: "md" },
  { id: "gtin", header: "GTIN", value: ({ gtin }) => gtin, from: "lg" },
  {
    id: "unitCost", header: "Cost", meaning: "What one unit costs the chain today, net of tax.", align: "right",
    value: ({ unitCost }) => unitCost, cell: ({ unitCost }) => exactMoney(unitCost, format), from: "sm",
  },
  {
    id: "regularPrice", header: "Regular price", meaning: "The price today without any reduction, tax included.", align: "right",
    value: ({ regularPrice }) => regularPrice, cell: ({ regularPrice }) => exactMoney(regularPrice, format),
  },
  { id: "taxRate", header: "Tax", align: "right", value: ({ taxRate }) => taxRate, cell: ({ taxRate }) => taxWords(taxRate, format), from: "md" },
];

const files = [
  { label: "Products and their terms", href: exportProducts.path, name: "products.csv" },
  { label: "Listings", href: exportListings.path, name: "listings.csv" },
  { label: "Funding", href: exportFunding.path, name: "funding.csv" },
];

/** Every product, to be found and entered; each has a page of its own. */
export const ProductsPage = () => {
  const query = useQuery(productsQuery());
  const mayWrite = usePermission("catalogue:write");
  const [isEntering, setIsEntering] = useState(false);
  const products = query.data ?? [];
  const categories = new Set(products.map(({ category }) => category));
  return (
    <>
      <PageHeader
        title="Products in the catalogue" heading="Catalogue"
        facts={query.data ? [countOf(products.length, "product"), countOf(categories.size, "category", "categories")] : []}
        actions={<CatalogueActions files={files} mayWrite={mayWrite} enter={{ label: "Enter a product", onEnter: () => setIsEntering(true) }} />}
      />
      <CatalogueViews />
      <Sheet flush>
        <QueryView
          query={query} loading="Reading the products" failure="The products could not be read"
          isEmpty={(all) => all.length === 0}
          empty={
            <EmptyState title="There is no product yet">
              {mayWrite ? "Upload a products file under Files, or enter the first one by hand." : "Your data admin enters the products."}
            </EmptyState>
          }
        >
          {(all) => <ProductTable products={all} />}
        </QueryView>
      </Sheet>
      <KindHistory kind="product" />
      {isEntering && <ProductDialog product={null} products={products} onClose={() => setIsEntering(false)} />}
    </>
  );
};

const ProductTable = ({ products }: { products: readonly Product[] }) => {
  const format = useChainFormat();
  const { values, set } = useFilters(["q", "category"]);
  const columns = useMemo(() => columnsOf(format), [format]);
  const categories = useMemo(() => [...new Map(products.map(({ category, categoryName }) => [category, categoryName]))].sort(), [products]);
  const shown = useMemo(
    () => products.filter(({ code, name, gtin, brand, category }) => holdsWords(values.q, [code, name, gtin, brand]) && (values.category === "" || category === values.category)),
    [products, values.q, values.category],
  );
  return (
    <>
      <div className="grid gap-3 border-b border-hairline p-4 items-end sm:grid-cols-[minmax(12rem,20rem)_14rem_auto] sm:px-5">
        <TextField type="search" label="Code, name, brand or GTIN" value={values.q} onChange={({ target }) => set({ q: target.value })} />
        <SelectField
          label="Category" value={values.category} onChange={(category) => set({ category })}
          choices={[{ value: "", label: "All" }, ...categories.map(([value, label]) => ({ value, label }))]}
        />
        {values.category !== "" && <CategoryName key={values.category} code={values.category} />}
      </div>
      {shown.length === 0 ? (
        <EmptyState title="No product is like that">Change the filters above.</EmptyState>
      ) : (
        <DataTable
          caption="Products" rows={shown} columns={columns} rowKey={({ code }) => code} initialSort={{ column: "code", descending: false }}
        />
      )}
    </>
  );
};
