import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { eventOfWeekSql } from "../../drivers";

/** What a week of sales tells of a store's price, cost and event. */
export type ToldBySales = {
  store: string;
  week: Day;
  regularPrice: number | null;
  unitCost: number | null;
  event: string | null;
};

const toldColumns = `
  s.code as store, w.week, w.regular_price::float8 as "regularPrice", w.unit_cost::float8 as "unitCost", w.event`;

type Range = { productId: number; storeIds: readonly number[]; first: Day; last: Day };

/** What sales tell of the weeks asked for, where there are sales of them already. */
export async function findToldWithin(
  em: EntityManager,
  { productId, storeIds, first, last }: Range,
): Promise<ToldBySales[]> {
  return em.execute<ToldBySales[]>(
    `select ${toldColumns}
     from weekly_sales w join stores s on s.id = w.store_id
     where w.product_id = ? and w.store_id in (?) and w.week between ?::date and ?::date`,
    [productId, [...storeIds], first, last],
  );
}

/** Per store the last row before a week that tells a regular price, and the last that tells a cost. */
export async function findToldBefore(
  em: EntityManager,
  { productId, storeIds, first }: Omit<Range, "last">,
): Promise<ToldBySales[]> {
  const lastTelling = (column: "regular_price" | "unit_cost") => `
    select ${toldColumns}
    from stores s cross join lateral (
      select * from weekly_sales r
      where r.product_id = ? and r.store_id = s.id and r.week < ?::date and r.${column} is not null
      order by r.week desc limit 1
    ) w where s.id in (?)`;
  const bounds = [productId, first, [...storeIds]];
  return em.execute<ToldBySales[]>(`${lastTelling("regular_price")} union all ${lastTelling("unit_cost")}`, [
    ...bounds,
    ...bounds,
  ]);
}

/** A product's terms from a day on. */
export type Terms = { validFrom: Day; unitCost: number | null; regularPrice: number | null; taxRate: number };

/** All terms of a product, oldest first. */
export async function findTerms(em: EntityManager, productId: number): Promise<Terms[]> {
  return em.execute<Terms[]>(
    `select valid_from as "validFrom", unit_cost::float8 as "unitCost", regular_price::float8 as "regularPrice",
       tax_rate::float8 as "taxRate"
     from product_terms where product_id = ? order by valid_from`,
    [productId],
  );
}

export type RegionEvent = { region: string; week: Day; event: string };

/** The calendar's event of each week in each region; ordinary weeks are not there. */
export async function findEvents(
  em: EntityManager,
  { regions, first, last }: { regions: readonly string[]; first: Day; last: Day },
): Promise<RegionEvent[]> {
  return em.execute<RegionEvent[]>(
    `select r.region, w.week, e.code as event
     from (select distinct region from stores where region in (?)) r
     cross join (select day::date as week from generate_series(?::date, ?::date, interval '7 days') day) w
     cross join lateral (${eventOfWeekSql({ week: "w.week", region: "r.region" })}) e`,
    [[...regions], first, last],
  );
}

/** A temperature of a region, or of one store; the other is empty. */
export type PlaceTemperature = { region: string; store: string; week: Day; temperatureC: number };

/** All temperatures known of regions and stores, those that came with a product's sales included (they go first). */
export async function findTemperatures(
  em: EntityManager,
  { productId, stores }: { productId: number; stores: readonly { id: number; code: string; region: string }[] },
): Promise<PlaceTemperature[]> {
  const codes = stores.map(({ code }) => code);
  const regions = stores.map(({ region }) => region);
  return em.execute<PlaceTemperature[]>(
    `select region, store, week, "temperatureC" from (
       select 1 as turn, '' as region, s.code as store, w.week, w.temperature_c as "temperatureC"
       from weekly_sales w join stores s on s.id = w.store_id
       where w.product_id = ? and w.store_id in (?) and w.temperature_c is not null
       union all
       select 2, '', store_code, week, temperature_c from temperatures where store_code in (?) and region = ''
       union all
       select 2, region, '', week, temperature_c from temperatures where region in (?) and store_code = ''
     ) t order by turn`,
    [productId, stores.map(({ id }) => id), codes, [...new Set(regions)]],
  );
}

/** The last week before a day in which any of the stores has a row of the product; null where there is none. */
export async function findLastWeekBefore(
  em: EntityManager,
  { productId, storeIds, first }: Omit<Range, "last">,
): Promise<Day | null> {
  const [row] = await em.execute<{ week: Day | null }[]>(
    "select max(week) as week from weekly_sales where product_id = ? and store_id in (?) and week < ?::date",
    [productId, [...storeIds], first],
  );
  return row?.week ?? null;
}
