import type { Product, Store } from "@shared/contract/catalogue";
import { Combobox } from "@/components/ui/combobox";

type DriverChoiceProps = {
  products: readonly Product[];
  stores: readonly Store[];
  product: string | null;
  store: string | null;
  onProduct: (code: string) => void;
  onStore: (code: string) => void;
};

/** Which product, in which store. */
export const DriverChoice = ({ products, stores, product, store, onProduct, onStore }: DriverChoiceProps) => (
  <>
    <Combobox
      label="Product"
      className="w-80 max-w-full"
      options={products.map(({ code, name, categoryName }) => ({ value: code, label: name, detail: categoryName }))}
      value={product}
      onChange={onProduct}
      placeholder="Find a product"
    />
    <Combobox
      label="Store"
      className="w-52 max-w-full"
      options={stores.map(({ code, name, region }) => ({ value: code, label: name, detail: region }))}
      value={store}
      onChange={onStore}
      placeholder="Find a store"
      disabled={stores.length === 0}
    />
  </>
);
