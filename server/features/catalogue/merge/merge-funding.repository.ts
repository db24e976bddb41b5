import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";
import { refuseSharedDays } from "./shared-days.repository";

const fundingOf = (staged: string): KeyedMerge => ({
  table: "product_funding",
  source: `select product_id, first_day, last_day, per_unit, lump_sum from ${staged}`,
  key: ["product_id", "first_day"],
  values: ["last_day", "per_unit", "lump_sum"],
  history: {
    what: "funding",
    code: (row) => `(select code from products where id = ${row}.product_id)`,
    described: (row) => ({
      firstDay: `${row}.first_day`, lastDay: `${row}.last_day`, perUnit: `${row}.per_unit`, lumpSum: `${row}.lump_sum`,
    }),
  },
});

/** What merging staged rows (product_id, first_day, last_day, per_unit, lump_sum) into the funding would do. */
export const compareFunding = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, fundingOf(staged));

/** Adds and changes contributions by product and first day. @throws ProblemError 409 where two would then share a day. */
export async function mergeFunding(em: EntityManager, staged: string, by: Author): Promise<void> {
  await mergeKeyed(em, fundingOf(staged), by);
  await refuseSharedDays(em, { table: "product_funding", of: ["product_id"], staged });
}
