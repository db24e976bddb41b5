import type { EntityManager } from "@mikro-orm/postgresql";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const eventsOf = (staged: string): KeyedMerge => ({
  table: "events",
  source: `select code, first_day, region, name, last_day from ${staged}`,
  key: ["code", "first_day", "region"],
  values: ["name", "last_day"],
});

/** What merging staged rows (code, first_day, region, name, last_day) into the events would do. */
export const compareEvents = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, eventsOf(staged));

/** Adds and changes occurrences of events by code, first day and region. */
export const mergeEvents = (em: EntityManager, staged: string): Promise<void> => mergeKeyed(em, eventsOf(staged));
