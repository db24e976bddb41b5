import type { EntityManager } from "@mikro-orm/postgresql";
import type { WeekRange } from "../load/sales-columns";
import type { PriceTally } from "./price-tally";
import type { SalesTogether } from "./sales-together.repository";

/** A price more than so many times the median, or less than that part of it, is unusual; what stands just at the limit is not. */
const farFromMedian = 5 * (1 + 1e-9);
/** So many loaded prices tell what is usual by themselves: a file that is wrong throughout is then seen. */
const enoughLoaded = 20;
/** More prices of a product are not looked at; they tell a median well enough to be compared with five times it. */
const mostLoaded = 200;
/** Prices of a year before the file and after it. */
const reachDays = 364;

type Loaded = { product: number; median: number; prices: number[] | null };
type Suspect = { id: number; median: number };
type Unusual = { line: number; product: string; column: string; value: string; price: number; median: number; total: number };

/** Warns of prices far from the product's median, of the loaded ones or, where they are few, of those and the file's. */
export async function reportUnusualPrices({ em, table, log, notes }: SalesTogether): Promise<void> {
  if (!notes.weeks) return;
  const loaded = await loadedPrices(em, { range: notes.weeks, products: [...notes.prices.products.keys()] });
  const suspects = suspectsOf(notes.prices, new Map(loaded.map((prices) => [prices.product, prices])));
  if (suspects.length === 0) return;
  const found = await em.execute<Unusual[]>(`
    select staged.line, product.code as product, case when staged.shelf_price is null then 'net_sales' else 'shelf_price' end as column,
      trim_scale(coalesce(staged.shelf_price, staged.net_sales))::text as value, told.price::float8 as price,
      suspect.median, (count(*) over ())::int as total
    from json_to_recordset(?::json) suspect (id integer, median float8)
    join ${table} staged on staged.product_id = suspect.id
    join products product on product.id = suspect.id
    cross join lateral (select coalesce(staged.shelf_price, case when staged.units > 0 then staged.net_sales / staged.units end) as price) told
    where told.price > 0 and (told.price > suspect.median * ${farFromMedian} or told.price * ${farFromMedian} < suspect.median)
    order by staged.line limit ${log.room("unusual-price")}`,
    [JSON.stringify(suspects)],
  );
  for (const { line, product, price, median, ...stored } of found) {
    // As the file has it, where that was remembered.
    const { column, value } = notes.prices.cellOf(line) ?? stored;
    log.report({ line, column, value, rule: "unusual-price", reason: `A price of ${amount(price)}, while the median of ${product} is ${amount(median)}` });
  }
  log.count("unusual-price", (found[0]?.total ?? 0) - found.length);
}

const amount = (value: number) => String(Number(value.toFixed(4)));

function loadedPrices(em: EntityManager, { range: { first, last }, products }: { range: WeekRange; products: number[] }): Promise<Loaded[]> {
  return em.execute<Loaded[]>(
    `select product.id as product, percentile_cont(0.5) within group (order by loaded.price)::float8 as median,
       case when count(*) < ${enoughLoaded} then json_agg(loaded.price::float8) end as prices
     from json_array_elements_text(?::json) wanted (id) cross join lateral (select wanted.id::integer as id) product
     cross join lateral (
       select price from weekly_sales sales
       where sales.product_id = product.id and sales.price_source in ('shelf', 'paid')
         and sales.week between date '${first}' - ${reachDays} and date '${last}' + ${reachDays}
       limit ${mostLoaded}
     ) loaded
     group by product.id`,
    [JSON.stringify(products)],
  );
}

function suspectsOf(tally: PriceTally, loaded: ReadonlyMap<number, Loaded>): Suspect[] {
  const suspects: Suspect[] = [];
  for (const [id, { lowest, highest, sample }] of tally.products) {
    const known = loaded.get(id);
    const median = known && known.prices === null ? known.median : medianOf([...sample, ...(known?.prices ?? [])]);
    if (highest > median * farFromMedian || lowest * farFromMedian < median) suspects.push({ id, median });
  }
  return suspects;
}

function medianOf(values: number[]): number {
  const sorted = values.sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  const upper = sorted[middle] ?? NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? upper) + upper) / 2;
}
