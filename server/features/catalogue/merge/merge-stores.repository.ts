import type { EntityManager } from "@mikro-orm/postgresql";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const storesOf = (staged: string): KeyedMerge => ({
  table: "stores",
  source: `select code, name, region, opened, closed from ${staged}`,
  key: ["code"],
  values: ["name", "region", "opened", "closed"],
});

/** What merging staged rows (code, name, region, opened, closed) into the stores would do. */
export const compareStores = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, storesOf(staged));

/** Adds and changes stores by their code; none is removed: a store that is gone gets a closing day. */
export const mergeStores = (em: EntityManager, staged: string): Promise<void> => mergeKeyed(em, storesOf(staged));
