import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";
import { refuseSharedDays } from "./shared-days.repository";

const listingsOf = (staged: string): KeyedMerge => ({
  table: "listings",
  source: `select product_id, store_id, first_day, last_day from ${staged}`,
  key: ["product_id", "store_id", "first_day"],
  values: ["last_day"],
  history: {
    what: "listing",
    code: (row) => `(select code from products where id = ${row}.product_id)`,
    described: (row) => ({
      store: `(select code from stores where id = ${row}.store_id)`, firstDay: `${row}.first_day`, lastDay: `${row}.last_day`,
    }),
  },
});

/** What merging staged rows (product_id, store_id, first_day, last_day) into the listings would do. */
export const compareListings = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, listingsOf(staged));

/** Adds and changes listings by product, store and first day. @throws ProblemError 409 where two would then share a day. */
export async function mergeListings(em: EntityManager, staged: string, by: Author): Promise<void> {
  await mergeKeyed(em, listingsOf(staged), by);
  await refuseSharedDays(em, { table: "listings", of: ["product_id", "store_id"], staged });
}
