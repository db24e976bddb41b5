import type { Product, Store } from "@shared/contract/catalogue";
import type { Store as StoreRow } from "./catalogue.entities";
import type { ProductOnDay } from "./catalogue.repository";

export function presentStore({ code, name, region, opened, closed }: StoreRow): Store {
  return { code, name, region, opened: opened ?? null, closed: closed ?? null };
}

export function presentProduct(product: ProductOnDay): Product {
  return { ...product, taxRate: product.taxRate ?? 0 };
}
