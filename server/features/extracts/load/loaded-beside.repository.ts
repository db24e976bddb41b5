import type { EntityManager } from "@mikro-orm/postgresql";
import { addWeeks } from "@shared/calendar";
import type { StagedRows } from "../kinds/kind";
import type { NewWeekBeside } from "./second-look";
import type { WeekRange } from "./sales-columns";

/** A new week is compared with so many before it, where enough of them are loaded to have a mean. */
const weeksBefore = 8;
const fewestWeeks = 4;

type StoreWeek = { week: string; storeId: number; units: number };

/** New weeks of a file beside the mean of the loaded ones before each, in the stores that have all of these weeks. */
export async function newWeeksBeside({ em, table }: StagedRows, newWeeks: readonly string[]): Promise<NewWeekBeside[]> {
  const [first, last] = [newWeeks[0], newWeeks.at(-1)];
  if (first === undefined || last === undefined) return [];
  const loaded = await unitsBefore(em, { first, last });
  if (new Set(loaded.map(({ week }) => week)).size < fewestWeeks) return [];
  const ofFile = await em.execute<StoreWeek[]>(
    `select week::text as week, store_id as "storeId", sum(units)::float8 as units from ${table}
     where week between date '${first}' and date '${last}' group by week, store_id`,
  );
  return besideMeans({ newWeeks, ofFile, loaded });
}

function unitsBefore(em: EntityManager, { first, last }: WeekRange): Promise<StoreWeek[]> {
  return em.execute<StoreWeek[]>(`
    select week::text as week, store_id as "storeId", sum(units)::float8 as units from weekly_sales sales
    where sales.week between date '${first}' - ${7 * weeksBefore} and date '${last}' - 7
    group by week, store_id`);
}

type Weeks = { newWeeks: readonly string[]; ofFile: readonly StoreWeek[]; loaded: readonly StoreWeek[] };

/** Puts new weeks beside the mean of the weeks before them. `newWeeks` that have fewer than four loaded before them are left out. */
export function besideMeans({ newWeeks, ofFile, loaded }: Weeks): NewWeekBeside[] {
  const loadedByWeek = byWeek(loaded);
  const fileByWeek = byWeek(ofFile);
  return newWeeks.flatMap((week) => {
    const before = Array.from({ length: weeksBefore }, (_, at) => loadedByWeek.get(addWeeks(week, -(at + 1)))).filter((found) => found !== undefined);
    const stores = [...(fileByWeek.get(week) ?? [])].filter(([store]) => before.every((found) => found.has(store)));
    if (before.length < fewestWeeks || stores.length === 0) return [];
    const units = stores.reduce((sum, [, ofStore]) => sum + ofStore, 0);
    const sumBefore = before.reduce((sum, found) => sum + stores.reduce((ofWeek, [store]) => ofWeek + (found.get(store) ?? 0), 0), 0);
    return [{ week, stores: stores.length, units, weeksBefore: before.length, meanBefore: sumBefore / before.length }];
  });
}

function byWeek(storeWeeks: readonly StoreWeek[]): Map<string, Map<number, number>> {
  const weeks = new Map<string, Map<number, number>>();
  for (const { week, storeId, units } of storeWeeks) {
    const stores = weeks.get(week) ?? new Map<number, number>();
    weeks.set(week, stores.set(storeId, units));
  }
  return weeks;
}
