import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { compareKeyed, mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

const eventsOf = (staged: string): KeyedMerge => ({
  table: "events",
  source: `select code, first_day, region, name, last_day from ${staged}`,
  key: ["code", "first_day", "region"],
  values: ["name", "last_day"],
  history: {
    what: "event",
    code: (row) => `${row}.code`,
    described: (row) => ({ name: `${row}.name`, firstDay: `${row}.first_day`, lastDay: `${row}.last_day`, region: `nullif(${row}.region, '')` }),
  },
});

/** What merging staged rows (code, first_day, region, name, last_day) into the events would do. */
export const compareEvents = (em: EntityManager, staged: string): Promise<MergeCounts> => compareKeyed(em, eventsOf(staged));

/** Adds and changes occurrences of events by code, first day and region. */
export const mergeEvents = (em: EntityManager, staged: string, by: Author): Promise<void> => mergeKeyed(em, eventsOf(staged), by);
