import * as contract from "@shared/contract/catalogue-listings";
import { route, type Route } from "../../../http/route";
import { tagged, writeOf } from "../changes/write-of";
import { presentListing } from "./listings.presenter";
import { createListings, listListings, putListing, removeListing } from "./listings.service";

const list = route(contract.listListings, async ({ em, query }) => {
  const { items, nextCursor } = await listListings(em, query);
  return { items: items.map(presentListing), nextCursor };
});

const create = route(contract.createListings, async (call) => ({ entered: await createListings(call.em, { listings: call.body, write: writeOf(call) }) }));

const put = route(contract.putListing, async (call) =>
  tagged(call, presentListing(await putListing(call.em, { ...call.params, ...call.body, write: writeOf(call) }))));

const remove = route(contract.deleteListing, async (call) => {
  await removeListing(call.em, { ...call.params, write: writeOf(call) });
  return undefined;
});

export const listingsRoutes: readonly Route[] = [list, create, put, remove];
