import type { Product, Store } from "@shared/contract/catalogue";
import type { Product as ProductRow, Store as StoreRow } from "./catalogue.entities";
import type { ProductOnDay } from "./catalogue.repository";
import { versionOf } from "./changes/versions";
import { productValues, storeValues } from "./describe";

export function presentStore(store: StoreRow): Store {
  const { code, name, region, opened, closed } = store;
  return { code, name, region, opened: opened ?? null, closed: closed ?? null, version: versionOfStore(store) };
}

export const versionOfStore = (store: StoreRow) => versionOf(storeValues(store));

export function presentProduct({ taxRate, ...product }: ProductOnDay): Product {
  const { name, gtin, brand, category, soldByWeight, replaces, replacesSizeRatio } = product;
  const version = versionOf({ name, gtin, brand, category, soldByWeight, replaces, replacesSizeRatio });
  return { ...product, taxRate: taxRate ?? 0, version };
}

/** Of a product with its category and the one it replaces; equal to the one in the list. */
export const versionOfProduct = (product: ProductRow) => versionOf(productValues(product));
