import { queryOptions } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { createListings, deleteListing, listListings, putListing, type Listing } from "@shared/contract/catalogue-listings";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

const pageSize = 1000;

/** All listings of a product, by store and first day. */
export const listingsQuery = (product: string) =>
  queryOptions({
    queryKey: ["listings", product],
    queryFn: async ({ signal }) => {
      const items: Listing[] = [];
      let cursor: string | undefined;
      do {
        const page = await call(listListings, { query: { product, limit: pageSize, cursor }, signal });
        items.push(...page.items);
        cursor = page.nextCursor ?? undefined;
      } while (cursor !== undefined);
      return items;
    },
  });

type Place = { product: string; store: string; firstDay: string; version: string };

export const enterListings = (body: BodyOf<typeof createListings>) => call(createListings, { body });

export const endListing = ({ product, store, firstDay, version }: Place, body: BodyOf<typeof putListing>) =>
  call(putListing, { params: { product, store, firstDay }, body, headers: versionHeaders(version) });

export const removeListing = ({ product, store, firstDay, version }: Place) =>
  call(deleteListing, { params: { product, store, firstDay }, headers: versionHeaders(version) });
