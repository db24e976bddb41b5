import type * as contract from "@shared/contract/catalogue-listings";
import type { Listing } from "../catalogue.entities";
import { versionOf } from "../changes/versions";
import { listingValues } from "../describe";
import type { ListedRow } from "./listings.repository";

/** Of a listing with its store. */
export const versionOfListing = (listing: Listing) => versionOf(listingValues(listing));

export function presentListing({ product, store, firstDay, lastDay }: ListedRow): contract.Listing {
  return { product, store, firstDay, lastDay, version: versionOf({ store, firstDay, lastDay }) };
}
