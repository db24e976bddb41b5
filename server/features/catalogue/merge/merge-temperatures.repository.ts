import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const temperaturesOf = (staged: string): KeyedMerge => ({
  table: "temperatures",
  source: `select week, region, store_code, temperature_c from ${staged}`,
  key: ["week", "region", "store_code"],
  values: ["temperature_c"],
  history: {
    what: "temperature",
    code: (row) => `coalesce(nullif(${row}.store_code, ''), ${row}.region)`,
    described: (row) => ({
      week: `${row}.week`, region: `nullif(${row}.region, '')`, store: `nullif(${row}.store_code, '')`, temperatureC: `${row}.temperature_c`,
    }),
  },
});

/** What merging staged rows (week, region or store_code, temperature_c) into the temperatures would do. */
export const compareTemperatures = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, temperaturesOf(staged));

/** Adds and changes weekly mean temperatures by week and region, or week and store. */
export const mergeTemperatures = (em: EntityManager, staged: string, by: Author): Promise<void> => mergeKeyed(em, temperaturesOf(staged), by);
