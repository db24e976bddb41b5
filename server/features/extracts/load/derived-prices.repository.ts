import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import { within, type WeekRange } from "./sales-columns";

/**
 * Derives the price of weeks that do not tell it themselves (no shelf price, nothing sold): the commonest price of the
 * region's stores that week, the lowest of equally common ones, else the regular price of the row, else of the product's
 * terms in the middle of the week. As `modelledPrice` and `commonestPrice` of shared/planning, in sets.
 *
 * Prices depend on all rows of a product and week, whichever extract they came from, so they are derived anew for every
 * product and week that a load or a withdrawal touched. Being a function of what is stored, they need no history.
 *
 * @param touched table with the products and weeks touched, all of them in `range`.
 */
export async function derivePrices(em: EntityManager, { touched, range }: { touched: string; range: WeekRange }): Promise<void> {
  // Most weeks tell their price, so the few others are picked out first.
  await em.execute(`
    create temporary table untold_rows on commit drop as
    select product_id, store_id, week, regular_price from weekly_sales sales
    where ${within(range)} and price_source not in ('shelf', 'paid')`);
  if (await exists(em, "select from untold_rows")) {
    await em.execute("analyze untold_rows");
    await deriveUntold(em, { touched, range });
  }
  await em.execute("drop table untold_rows");
}

async function deriveUntold(em: EntityManager, { touched, range }: { touched: string; range: WeekRange }): Promise<void> {
  await em.execute(`
    with untold as materialized (
      select wanting.product_id, wanting.store_id, wanting.week, store.region, wanting.regular_price
      from untold_rows wanting join stores store on store.id = wanting.store_id
      where exists (select from ${touched} touched where touched.product_id = wanting.product_id and touched.week = wanting.week)
    ),
    counted as (
      select wanted.product_id, wanted.week, wanted.region, sales.price, count(*) as times
      from (select distinct product_id, week, region from untold) wanted
      join weekly_sales sales on sales.product_id = wanted.product_id and sales.week = wanted.week and ${within(range)}
      join stores store on store.id = sales.store_id and store.region = wanted.region
      where sales.price_source in ('shelf', 'paid')
      group by wanted.product_id, wanted.week, wanted.region, sales.price
    ),
    commonest as (
      select distinct on (product_id, week, region) product_id, week, region, price
      from counted order by product_id, week, region, times desc, price
    ),
    derived as (
      select untold.product_id, untold.store_id, untold.week,
        coalesce(commonest.price, untold.regular_price, terms.regular_price) as price,
        case when commonest.price is not null then 'region'
          when coalesce(untold.regular_price, terms.regular_price) is not null then 'regular' else 'unknown' end as price_source
      from untold
      left join commonest using (product_id, week, region)
      left join lateral (
        select regular_price from product_terms
        where product_id = untold.product_id and valid_from <= untold.week + 3
        order by valid_from desc limit 1
      ) terms on commonest.price is null and untold.regular_price is null
    )
    update weekly_sales sales set price = derived.price, price_source = derived.price_source
    from derived
    where sales.product_id = derived.product_id and sales.store_id = derived.store_id and sales.week = derived.week
      and ${within(range)} and (sales.price, sales.price_source) is distinct from (derived.price, derived.price_source)`);
}
