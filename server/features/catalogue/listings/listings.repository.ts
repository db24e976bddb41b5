import type { EntityManager } from "@mikro-orm/postgresql";
import { ListingEntity, type Listing } from "../catalogue.entities";

/** Where a page of listings goes on. */
export type ListingPlace = { product: string; store: string; firstDay: string };

/** A listing with the codes of its product and store. */
export type ListedRow = ListingPlace & { lastDay: string | null };

type Wanted = { product?: string; store?: string; after?: ListingPlace; limit: number };

/** Listings by product, store and first day, from after a place on; one more than the limit where there are more. */
export async function findListings(em: EntityManager, { product, store, after, limit }: Wanted): Promise<ListedRow[]> {
  const conditions: [string, string[]][] = [
    ...(product === undefined ? [] : [["product.code = ?", [product]] as [string, string[]]]),
    ...(store === undefined ? [] : [["store.code = ?", [store]] as [string, string[]]]),
    ...(after === undefined ? [] : [["(product.code, store.code, listing.first_day) > (?, ?, ?::date)", [after.product, after.store, after.firstDay]] as [string, string[]]]),
  ];
  return em.execute<ListedRow[]>(
    `select product.code as product, store.code as store, listing.first_day as "firstDay", listing.last_day as "lastDay"
     from listings listing join products product on product.id = listing.product_id join stores store on store.id = listing.store_id
     ${conditions.length === 0 ? "" : `where ${conditions.map(([sql]) => sql).join(" and ")}`}
     order by product.code, store.code, listing.first_day limit ?`,
    [...conditions.flatMap(([, values]) => values), limit + 1],
  );
}

/** A product's listings in some stores. */
export function findListingsIn(em: EntityManager, { productId, storeIds }: { productId: number; storeIds: readonly number[] }): Promise<Listing[]> {
  return em.find(ListingEntity, { product: { id: productId }, store: { id: { $in: [...storeIds] } } }, { populate: ["store"], orderBy: { firstDay: "asc" } });
}

type Entered = { productId: number; storeIds: readonly number[]; firstDay: string; lastDay: string | null };

/** Puts new listings where a merge takes them from, for as long as the transaction lasts; answers the table's name. */
export async function stageListings(em: EntityManager, { productId, storeIds, firstDay, lastDay }: Entered): Promise<string> {
  await em.execute(
    `create temporary table entered_listings on commit drop as
     select line::int, ?::int as product_id, store_id::int, ?::date as first_day, ?::date as last_day
     from jsonb_array_elements_text(?::jsonb) with ordinality as given(store_id, line)`,
    [productId, firstDay, lastDay, JSON.stringify(storeIds)],
  );
  return "entered_listings";
}
