import { exists } from "../../../database/exists";
import type { SalesTogether } from "./sales-together.repository";

type Unlisted = { line: number; product: string; store: string; week: string; first: string; last: string | null; total: number };

/** Warns of rows of products that are listed in the store, but not in that week. Where nothing is listed nothing is said. */
export async function reportUnlisted({ em, table, log }: SalesTogether): Promise<void> {
  if (!(await exists(em, "select from listings"))) return;
  const found = await em.execute<Unlisted[]>(`
    select staged.line, product.code as product, store.code as store, staged.week::text as week,
      known.first::text as first, known.last::text as last, (count(*) over ())::int as total
    from ${table} staged
    join (
      select product_id, store_id, min(first_day) as first, nullif(max(coalesce(last_day, 'infinity')), 'infinity') as last
      from listings group by product_id, store_id
    ) known on known.product_id = staged.product_id and known.store_id = staged.store_id
    join products product on product.id = staged.product_id
    join stores store on store.id = staged.store_id
    where not exists (
      select from listings listing
      where listing.product_id = staged.product_id and listing.store_id = staged.store_id
        and listing.first_day <= staged.week + 6 and coalesce(listing.last_day, 'infinity') >= staged.week
    )
    order by staged.line limit ${log.room("outside-listing")}`);
  for (const { line, product, store, week, first, last } of found) {
    const listed = last === null ? `from ${first} on` : `from ${first} to ${last}`;
    log.report({ line, column: "", value: `${product}, ${store}, ${week}`, rule: "outside-listing", reason: `${product} is listed in ${store} ${listed}, but not in this week` });
  }
  log.count("outside-listing", (found[0]?.total ?? 0) - found.length);
}
