import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const storesOf = (staged: string): KeyedMerge => ({
  table: "stores",
  source: `select code, name, region, opened, closed from ${staged}`,
  key: ["code"],
  values: ["name", "region", "opened", "closed"],
  history: {
    what: "store",
    code: (row) => `${row}.code`,
    described: (row) => ({ name: `${row}.name`, region: `${row}.region`, opened: `${row}.opened`, closed: `${row}.closed` }),
  },
});

/** What merging staged rows (code, name, region, opened, closed) into the stores would do. */
export const compareStores = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, storesOf(staged));

/** Adds and changes stores by their code; none is removed: a store that is gone gets a closing day. */
export const mergeStores = (em: EntityManager, staged: string, by: Author): Promise<void> => mergeKeyed(em, storesOf(staged), by);
