import type { Day } from "@shared/calendar";
import type { ListingRow } from "../types";
import type { ChainProduct } from "./products";
import type { ChainStore } from "./stores";

/** Every store has every product from the first week on: the chain follows these because all of its stores keep them. */
export function listingsFrom({ products, stores, firstWeek }: { products: readonly ChainProduct[]; stores: readonly ChainStore[]; firstWeek: Day }): ListingRow[] {
  return products.flatMap(({ code }) => stores.map((store) => ({ product: code, store: store.code, firstDay: firstWeek, lastDay: null })));
}
