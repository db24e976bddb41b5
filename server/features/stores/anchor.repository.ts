import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";

/** The regular price the chain's terms say on a day; null where they say none. */
export async function findRegularPrice(
  em: EntityManager,
  { productId, on }: { productId: number; on: Day },
): Promise<number | null> {
  const [terms] = await em.execute<{ price: number | null }[]>(
    `select regular_price::float8 as price from product_terms
     where product_id = ? and valid_from <= ?::date order by valid_from desc limit 1`,
    [productId, on],
  );
  return terms?.price ?? null;
}

/** The commonest regular price of a product's last week of sales, of equals the lower; null where there is none. */
export async function findLastRegularPrice(em: EntityManager, productId: number): Promise<number | null> {
  const [last] = await em.execute<{ price: number }[]>(
    `select regular_price::float8 as price from weekly_sales
     where product_id = ? and regular_price is not null
       and week = (select max(week) from weekly_sales where product_id = ? and regular_price is not null)
     group by regular_price order by count(*) desc, regular_price limit 1`,
    [productId, productId],
  );
  return last?.price ?? null;
}
