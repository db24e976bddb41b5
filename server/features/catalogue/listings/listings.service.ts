import type { EntityManager } from "@mikro-orm/postgresql";
import type { newListingsSchema } from "@shared/contract/catalogue-listings";
import { z } from "zod";
import { notFound } from "../../../errors";
import { readCursor, writeCursor } from "../../../http/page-cursor";
import { ListingEntity, type Listing } from "../catalogue.entities";
import type { Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { lastBeforeFirst, requireNoOverlap } from "../changes/overlapping-days";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { requireNamedProduct, requireNamedStores, requireProductAt, requireStoreAt } from "../codes-named.repository";
import { listingValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { mergeListings } from "../merge/merge-listings.repository";
import { versionOfListing } from "./listings.presenter";
import { findListings, findListingsIn, stageListings, type ListedRow } from "./listings.repository";

const place = z.object({ product: z.string(), store: z.string(), firstDay: z.string() });

type Wanted = { product?: string; store?: string; cursor?: string; limit: number };

/** A page of listings by product, store and first day. @throws ProblemError 422 for a cursor that is none. */
export async function listListings(em: EntityManager, { cursor, ...wanted }: Wanted): Promise<{ items: ListedRow[]; nextCursor: string | null }> {
  const found = await findListings(em, { ...wanted, after: readCursor(place, cursor) });
  const items = found.slice(0, wanted.limit);
  const last = items.at(-1);
  const next = found.length > wanted.limit && last ? writeCursor({ product: last.product, store: last.store, firstDay: last.firstDay }) : null;
  return { items, nextCursor: next };
}

type New = { listings: z.output<typeof newListingsSchema>; write: Write };

/** Lists a product in stores, in all or none. @throws ProblemError 422 that names a field: unknown codes, or days that another listing covers. */
export function createListings(em: EntityManager, { listings, write }: New): Promise<number> {
  return changing(em, async (inner) => {
    const { product: code, firstDay, lastDay } = listings;
    const product = await requireNamedProduct(inner, { code, path: "product" });
    const codes = [...new Set(listings.stores)];
    const stores = await requireNamedStores(inner, { codes, path: "stores" });
    const storeIds = stores.map(({ id }) => id);
    const existing = await findListingsIn(inner, { productId: product.id, storeIds });
    for (const [at, store] of stores.entries()) {
      requireOwnDays({ product: code, store: store.code, days: { firstDay, lastDay }, others: existing.filter((row) => row.store.id === store.id), path: `stores.${at}` });
    }
    await mergeListings(inner, await stageListings(inner, { productId: product.id, storeIds, firstDay, lastDay }), write.by);
    return stores.length;
  });
}

type Place = { product: string; store: string; firstDay: string; write: Write };

/** Says until when a store has a product; enters the listing where it is new. @throws ProblemError 404, 412, or 422 that names a field. */
export function putListing(em: EntityManager, { lastDay, ...at }: Place & { lastDay: string | null }): Promise<ListedRow> {
  return changing(em, async (inner) => {
    const { product: code, store: storeCode, firstDay, write } = at;
    if (lastDay !== null && lastDay < firstDay) throw lastBeforeFirst();
    const { row, others, product, store } = await seenListing(inner, at);
    requireOwnDays({ product: code, store: storeCode, days: { firstDay, lastDay }, others, path: "lastDay" });
    const before = row ? listingValues(row) : null;
    const written = row ? inner.assign(row, { lastDay }) : inner.create(ListingEntity, { product, store, firstDay, lastDay });
    inner.persist(written);
    recordChange(inner, { by: write.by, what: "listing", code, before, after: listingValues(written) });
    return { product: code, store: storeCode, firstDay, lastDay };
  });
}

/** Removes a listing. @throws ProblemError 404 or 412. */
export function removeListing(em: EntityManager, at: Place): Promise<void> {
  return changing(em, async (inner) => {
    const { row } = await seenListing(inner, at);
    if (!row) throw notFound("listing");
    inner.remove(row);
    recordChange(inner, { by: at.write.by, what: "listing", code: at.product, before: listingValues(row), after: null });
  });
}

async function seenListing(em: EntityManager, { product: code, store: storeCode, firstDay, write }: Place) {
  const product = await requireProductAt(em, code);
  const store = await requireStoreAt(em, storeCode);
  const all = await findListingsIn(em, { productId: product.id, storeIds: [store.id] });
  const row = all.find((each) => each.firstDay === firstDay);
  await requireSeen({
    seen: write.seen, version: row ? versionOfListing(row) : null, what: `the listing of ${code} in ${storeCode} from ${firstDay}`,
    lastChange: () => findLastChange(em, { kind: "product", what: "listing", code }),
  });
  return { row, others: all.filter((each) => each !== row), product, store };
}

type Own = { product: string; store: string; days: { firstDay: string; lastDay: string | null }; others: readonly Listing[]; path: string };

function requireOwnDays({ product, store, days, others, path }: Own): void {
  requireNoOverlap({ days, others, path, says: (taken) => `${store} lists ${product} ${taken} already: two listings cannot share a day.` });
}
