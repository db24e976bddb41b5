import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { exists } from "../../../database/exists";
import { within, type WeekRange } from "../load/sales-columns";

/** Waits until nobody else counts, and keeps others out until the transaction ends. */
export async function lockCoverage(em: EntityManager): Promise<void> {
  await em.execute("select pg_advisory_xact_lock(hashtext('shelftide coverage'))");
}

/** An extract that was loaded or withdrawn, and is yet to be counted in. */
export type PendingExtract = { id: string; isWithdrawn: boolean; firstWeek: Day | null; lastWeek: Day | null };

/**
 * Takes the next extract that is yet to be counted in, and notes that it is, should the transaction come to its end. Its
 * row is kept from others until then: what is withdrawn meanwhile is pending again afterwards.
 */
export async function takePending(em: EntityManager): Promise<PendingExtract | undefined> {
  const [extract] = await em.execute<PendingExtract[]>(
    `update extracts set coverage_pending = false
     where id = (select id from extracts where coverage_pending order by uploaded_at, id limit 1) and coverage_pending
     returning id, state = 'withdrawn' as "isWithdrawn", first_week::text as "firstWeek", last_week::text as "lastWeek"`,
  );
  return extract;
}

export const hasPending = (em: EntityManager): Promise<boolean> => exists(em, "select from extracts where coverage_pending");

/**
 * Counts anew what is loaded of each store in these weeks, whoever brought it. A store and week of which nothing is left
 * stays on record with no rows, and with the extract that was withdrawn.
 */
export async function recount(em: EntityManager, { range, withdrawn }: { range: WeekRange; withdrawn: string | null }): Promise<void> {
  await em.execute(
    `with parts as (
       select store_id, week, extract_id, count(*)::int as row_count from weekly_sales sales where ${within(range)}
       group by store_id, week, extract_id
     ),
     counted as materialized (
       select parts.store_id, parts.week, sum(parts.row_count)::int as row_count,
         (array_agg(extract.id order by extract.loaded_at desc nulls last, extract.id))[1] as extract_id
       from parts left join extracts extract on extract.id = parts.extract_id
       group by parts.store_id, parts.week
     ),
     restated as (select distinct store_id, week from weekly_sales_history sales where ${within(range)}),
     written as (
       insert into store_weeks (store_id, week, row_count, is_restated, extract_id)
       select counted.store_id, counted.week, counted.row_count, restated.store_id is not null, counted.extract_id
       from counted left join restated using (store_id, week)
       on conflict (store_id, week) do update
         set row_count = excluded.row_count, is_restated = excluded.is_restated, extract_id = excluded.extract_id
         where (store_weeks.row_count, store_weeks.is_restated, store_weeks.extract_id)
           is distinct from (excluded.row_count, excluded.is_restated, excluded.extract_id)
     )
     update store_weeks sales set row_count = 0, is_restated = false, extract_id = coalesce(?::uuid, sales.extract_id)
     where ${within(range)} and sales.row_count > 0
       and not exists (select from counted where counted.store_id = sales.store_id and counted.week = sales.week)`,
    [withdrawn],
  );
}

/**
 * Notes which stores and weeks an extract holds rows of, just before they are withdrawn: so that it is known that there
 * was something, even where nobody had counted it yet.
 */
export async function noteBeforeWithdrawal(em: EntityManager, { extractId, range }: { extractId: string; range: WeekRange }): Promise<void> {
  await em.execute(
    `insert into store_weeks (store_id, week, row_count, extract_id)
     select distinct sales.store_id, sales.week, 0, sales.extract_id from weekly_sales sales
     where sales.extract_id = ? and ${within(range)} on conflict (store_id, week) do nothing`,
    [extractId],
  );
}

export type CoveredStore = { id: number; code: string; name: string; region: string; opened: Day | null; closed: Day | null };

export function findCoveredStores(em: EntityManager): Promise<CoveredStore[]> {
  return em.execute<CoveredStore[]>("select id, code, name, region, opened::text, closed::text from stores order by code");
}

export type CountedWeek = { storeId: number; week: Day; rowCount: number; isRestated: boolean; extractId: string | null };

export function findCountedWeeks(em: EntityManager, { first, last }: WeekRange): Promise<CountedWeek[]> {
  return em.execute<CountedWeek[]>(
    `select store_id as "storeId", week::text as week, row_count as "rowCount", is_restated as "isRestated", extract_id as "extractId"
     from store_weeks where week between ?::date and ?::date`,
    [first, last],
  );
}

/** The last week of which anything is loaded. */
export async function lastCountedWeek(em: EntityManager): Promise<Day | null> {
  const [{ last }] = await em.execute<[{ last: Day | null }]>("select max(week)::text as last from store_weeks where row_count > 0");
  return last;
}

export function findFileNames(em: EntityManager, ids: readonly string[]): Promise<{ id: string; fileName: string }[]> {
  return em.execute<{ id: string; fileName: string }[]>(
    `select id, file_name as "fileName" from extracts where id = any(?::uuid[]) order by uploaded_at, id`, [`{${ids.join(",")}}`],
  );
}
