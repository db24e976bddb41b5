import type { EntityManager } from "@mikro-orm/postgresql";
import type { SalesTogether } from "./sales-together.repository";

/** Rows loaded so many days before the file's first week, or after its last, count as before and after a gap. */
const reachDays = 56;
/** Weeks named in an issue. */
const mostNamed = 6;

type Range = { first: string; last: string };
type Gap = { line: number; store: string; product: string; products: number; weeks: string[]; rows: number };

/**
 * Warns where a product has rows in a store before and after some weeks, in the file or loaded, but none for these, though
 * the store was open and the product listed. What is missing in the same weeks of a store is told together, and counted in
 * rows. Nothing is said where the source leaves out what was not sold.
 */
export async function reportMissingWeeks({ em, table, extractId, log }: SalesTogether): Promise<void> {
  const [{ skips }] = await em.execute<[{ skips: boolean }]>(
    "select coalesce(layout_in_force->>'missingMeans' = 'zero', false) as skips from extracts where id = ?", [extractId],
  );
  if (skips) return;
  await em.execute(`
    create temporary table file_pairs on commit drop as
    select product_id, store_id, count(*) as rows, min(week) as first, max(week) as last from ${table} group by product_id, store_id`);
  const [range] = await em.execute<[Range | { first: null; last: null }]>("select min(first)::text as first, max(last)::text as last from file_pairs");
  if (range.first !== null && (await findSpans(em, range))) {
    const gaps = await findGaps(em, { table, range, limit: log.room("missing-weeks") });
    for (const gap of gaps) {
      log.report({ line: gap.line, column: "week", value: named(gap.weeks), rule: "missing-weeks", reason: reasonOf(gap) });
      log.count("missing-weeks", gap.products * gap.weeks.length - 1);
      log.list("missing-weeks", gap.products * gap.weeks.length - 1);
    }
    log.count("missing-weeks", (gaps[0]?.rows ?? 0) - gaps.reduce((sum, { products, weeks }) => sum + products * weeks.length, 0));
  }
  await em.execute("drop table if exists file_pairs, file_spans");
}

function named(weeks: readonly string[]): string {
  if (weeks.length <= mostNamed) return weeks.join(", ");
  return `${weeks.slice(0, mostNamed).join(", ")} and ${weeks.length - mostNamed} more`;
}

function reasonOf({ store, product, products, weeks }: Gap): string {
  const these = weeks.length === 1 ? "this week" : "these weeks";
  if (products === 1) return `${product} has rows in ${store} before and after ${these}, but none for ${weeks.length === 1 ? "it" : "them"}`;
  return `${products} products, ${product} for one, have rows in ${store} before and after ${these}, but none for ${weeks.length === 1 ? "it" : "them"}`;
}

const sameCell = (alias: string) => `${alias}.product_id = span.product_id and ${alias}.store_id = span.store_id`;
const withinReach = ({ first, last }: Range) => `sales.week between date '${first}' - ${reachDays} and date '${last}' + ${reachDays}`;

/** Notes for each pair whose rows do not follow each other week by week from where to where they reach; answers whether there is any. */
async function findSpans(em: EntityManager, range: Range): Promise<boolean> {
  const [{ near }] = await em.execute<[{ near: boolean }]>(`select exists (select from weekly_sales sales where ${withinReach(range)}) as near`);
  const nearest = (which: "max" | "min", between: string) => (near
    ? `(select ${which}(week) from weekly_sales sales where ${sameCell("sales")} and ${withinReach(range)} and sales.week between ${between})`
    : "null::date");
  await em.execute(`
    create temporary table file_spans on commit drop as
    select product_id, store_id, coalesce(before, first) as first, coalesce(after, last) as last
    from (
      select *, ${nearest("max", `span.first - ${reachDays} and span.first - 7`)} as before,
        ${nearest("min", `span.last + 7 and span.last + ${reachDays}`)} as after
      from file_pairs span
    ) reached
    where (coalesce(after, last) - coalesce(before, first)) / 7 + 1 > rows + (before is not null)::int + (after is not null)::int`);
  const [{ any }] = await em.execute<[{ any: boolean }]>("select exists (select from file_spans) as any");
  return any;
}

function findGaps(em: EntityManager, { table, range, limit }: { table: string; range: Range; limit: number }): Promise<Gap[]> {
  return em.execute<Gap[]>(`
    with absent as (
      select span.product_id, span.store_id, array_agg(day::date order by day) as weeks
      from file_spans span
      join stores store on store.id = span.store_id
      cross join lateral generate_series(span.first + 7, span.last - 7, interval '7 days') day
      where coalesce(store.opened, '-infinity') <= day::date + 6 and coalesce(store.closed, 'infinity') >= day::date
        and not exists (select from ${table} staged where ${sameCell("staged")} and staged.week = day::date)
        and not exists (select from weekly_sales sales where ${sameCell("sales")} and sales.week = day::date and ${withinReach(range)})
        and (
          not exists (select from listings listing where ${sameCell("listing")})
          or exists (select from listings listing where ${sameCell("listing")}
            and listing.first_day <= day::date + 6 and coalesce(listing.last_day, 'infinity') >= day::date)
        )
      group by span.product_id, span.store_id
    ),
    placed as (
      -- The row of the file behind the first absent week, else the last before it.
      select distinct on (span.product_id, span.store_id) span.*, staged.line
      from absent span join ${table} staged on ${sameCell("staged")}
      order by span.product_id, span.store_id, staged.week > span.weeks[1] desc, abs(staged.week - span.weeks[1])
    )
    select min(placed.line) as line, store.code as store, (array_agg(product.code order by placed.line))[1] as product,
      count(*)::int as products, array_to_json(placed.weeks) as weeks,
      (sum(count(*) * cardinality(placed.weeks)) over ())::int as rows
    from placed join products product on product.id = placed.product_id join stores store on store.id = placed.store_id
    group by store.code, placed.weeks
    order by line limit ${limit}`);
}
