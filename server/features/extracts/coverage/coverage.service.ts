import type { EntityManager } from "@mikro-orm/postgresql";
import { addWeeks, firstDayOfWeek, lastDayOfWeek, weeksBetween, type Day, type WeekStart } from "@shared/calendar";
import { calendarOf, dayIn, getChain } from "../../chain";
import {
  findCountedWeeks, findCoveredStores, findFileNames, hasPending, lastCountedWeek, type CountedWeek, type CoveredStore,
} from "./coverage.repository";

/** What is usual for a store is told by no less than a year. */
const fewestWeeksForUsual = 52;

/** What is known of the chain's stores in some weeks. */
export type CoverageRead = {
  weeks: Day[];
  /** All weeks whose rows say what is usual; `weeks` are the last of them. */
  counted: CountedWeek[];
  weekStart: WeekStart;
  stores: CoveredStore[];
  files: { id: string; fileName: string }[];
  isBehind: boolean;
};

/**
 * What is loaded of each store in some of the chain's weeks.
 *
 * @param asked.until a day of the last week, by default of the last that has ended; never later than that or the last loaded.
 */
export async function readCoverage(em: EntityManager, { until, weeks: count, now }: { until?: Day; weeks: number; now: Date }): Promise<CoverageRead> {
  const chain = await getChain(em);
  const { weekStart } = calendarOf(chain);
  const week = (day: Day) => firstDayOfWeek(day, weekStart);
  const ended = addWeeks(week(dayIn(chain.timeZone, now)), -1);
  const loaded = week((await lastCountedWeek(em)) ?? ended);
  const latest = loaded > ended ? loaded : ended;
  const asked = week(until ?? ended);
  const last = asked < latest ? asked : latest;
  const first = addWeeks(last, 1 - count);
  const counted = await findCountedWeeks(em, { first: addWeeks(last, 1 - Math.max(count, fewestWeeksForUsual)), last: lastDayOfWeek(last) });
  const ids = new Set(counted.flatMap(({ extractId, week: day }) => (extractId !== null && day >= first ? [extractId] : [])));
  return {
    weeks: weeksBetween(first, last), counted, weekStart,
    stores: await findCoveredStores(em),
    files: ids.size === 0 ? [] : await findFileNames(em, [...ids]),
    isBehind: await hasPending(em),
  };
}
