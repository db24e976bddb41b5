import type { EntityManager } from "@mikro-orm/postgresql";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const temperaturesOf = (staged: string): KeyedMerge => ({
  table: "temperatures",
  source: `select week, region, store_code, temperature_c from ${staged}`,
  key: ["week", "region", "store_code"],
  values: ["temperature_c"],
});

/** What merging staged rows (week, region or store_code, temperature_c) into the temperatures would do. */
export const compareTemperatures = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, temperaturesOf(staged));

/** Adds and changes weekly mean temperatures by week and region, or week and store. */
export const mergeTemperatures = (em: EntityManager, staged: string): Promise<void> => mergeKeyed(em, temperaturesOf(staged));
