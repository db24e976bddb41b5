import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";

/** What it means that a product has no row in a week of a store in which it is listed. */
export type MissingMeans = "zero" | "unknown";

export type StoreWeeks = { storeIds: readonly number[]; first: Day; last: Day };

/**
 * The weeks of stores in which a product without a row has sold nothing: those whose rows came last from a file whose layout
 * says so. In every other week, also one that is not loaded, such a product's units are not known.
 */
export async function weeksWhereMissingMeansZero(em: EntityManager, { storeIds, first, last }: StoreWeeks): Promise<{ storeId: number; week: Day }[]> {
  if (storeIds.length === 0) return [];
  return em.execute<{ storeId: number; week: Day }[]>(
    `select loaded.store_id as "storeId", loaded.week::text as week
     from store_weeks loaded join extracts source on source.id = loaded.extract_id
     where loaded.store_id in (?) and loaded.week between ?::date and ?::date and loaded.row_count > 0
       and source.state = 'loaded' and source.layout_in_force->>'missingMeans' = 'zero'
     order by loaded.store_id, loaded.week`,
    [[...storeIds], first, last],
  );
}

/** What a missing row means in one week of one store. */
export async function missingMeansIn(em: EntityManager, { storeId, week }: { storeId: number; week: Day }): Promise<MissingMeans> {
  const [found] = await weeksWhereMissingMeansZero(em, { storeIds: [storeId], first: week, last: week });
  return found ? "zero" : "unknown";
}
