import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import type { SalesRow } from "@shared/planning/sales-row";
import { eventOfWeekSql, termsOfWeekSql } from "./week-event-sql";

/** A store-week with what the catalogue says about it. */
export type StoredSalesRow = SalesRow & {
  unitCost: number | null;
  /** Share, for example 0.21. */
  taxRate: number;
};

/** A product's weeks in some stores; bounds are included, and open where absent. */
export type SalesRange = { productId: number; storeIds: readonly number[]; first?: Day; last?: Day };

const bounds = ({ first, last }: { first?: Day; last?: Day }) => [first ?? "-infinity", last ?? "infinity"];

/**
 * The weeks of a product in stores, by store and week, found by the primary key and filled up in sets: temperature from
 * the row, else the store's own, else its region's; event from the row, else the calendar of the store's region (the
 * one that covers most of the week); regular price and cost from the row, else the product's terms; tax by date.
 */
export async function readSalesRows(em: EntityManager, range: SalesRange): Promise<StoredSalesRow[]> {
  if (range.storeIds.length === 0) return [];
  return em.execute<StoredSalesRow[]>(salesSql, [range.productId, [...range.storeIds], ...bounds(range)]);
}

const salesSql = `
  with cells as materialized (
    select s.code as store, s.region, w.*
    from weekly_sales w join stores s on s.id = w.store_id
    where w.product_id = ? and w.store_id in (?) and w.week between ?::date and ?::date
  ),
  calendar as materialized (
    select r.region, r.week, e.code as event
    from (select distinct region, week from cells) r
    cross join lateral (${eventOfWeekSql({ week: "r.week", region: "r.region" })}) e
  ),
  terms as materialized (
    select d.week, t.unit_cost, t.regular_price, t.tax_rate
    from (select distinct product_id, week from cells) d
    cross join lateral (${termsOfWeekSql({ week: "d.week", productId: "d.product_id" })}) t
  )
  select c.store, p.code as product, c.week, c.units::float8 as units, c.net_sales::float8 as "netSales",
    coalesce(c.regular_price, t.regular_price)::float8 as "regularPrice", c.shelf_price::float8 as "shelfPrice",
    c.price::float8 as price, c.price_source as "priceSource", c.feature, c.display, c.mechanic,
    c.open_days as "openDays", c.stock_out_days as "stockOutDays",
    coalesce(c.temperature_c, own.temperature_c, regional.temperature_c) as "temperatureC",
    coalesce(c.event, k.event) as event,
    coalesce(c.unit_cost, t.unit_cost)::float8 as "unitCost", coalesce(t.tax_rate, 0)::float8 as "taxRate"
  from cells c
  join products p on p.id = c.product_id
  left join terms t on t.week = c.week
  left join calendar k on k.region = c.region and k.week = c.week
  left join temperatures own on own.week = c.week and own.region = '' and own.store_code = c.store
  left join temperatures regional on regional.week = c.week and regional.region = c.region and regional.store_code = ''
  order by c.store, c.week`;

/** A store and how its weeks of a product count. */
export type SellingStore = {
  id: number;
  code: string;
  name: string;
  region: string;
  weeks: number;
  meanWeeklyUnits: number;
};

/** The stores that have weeks of a product, by code, with the mean of their weekly units. */
export async function storesThatSold(
  em: EntityManager,
  { productId, first, last }: { productId: number; first?: Day; last?: Day },
): Promise<SellingStore[]> {
  return em.execute<SellingStore[]>(
    `select s.id, s.code, s.name, s.region, w.weeks, w.mean as "meanWeeklyUnits"
     from (
       select store_id, count(*)::int as weeks, avg(units)::float8 as mean from weekly_sales
       where product_id = ? and week between ?::date and ?::date group by store_id
     ) w join stores s on s.id = w.store_id
     order by s.code`,
    [productId, ...bounds({ first, last })],
  );
}
