import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import type { WeekRange } from "../load/sales-columns";
import type { SalesTogether } from "./sales-together.repository";

/** Rows loaded so many days before the file's first week, or after its last, count as before and after a gap. */
const reachDays = 56;
/** Rows further apart are not before and after a gap. */
const mostWeeksAway = 53;
/** Weeks named in an issue. */
const mostNamed = 6;

type Gap = { line: number; store: string; product: string; products: number; weeks: string[]; rows: number };

/**
 * Warns where a product has rows in a store before and after some weeks, in the file or loaded, but none for these, though
 * the store was open and the product listed. What is missing in the same weeks of a store is told together, and counted in
 * rows. Nothing is said where the source leaves out what was not sold.
 */
export async function reportMissingWeeks({ em, table, extractId, log, notes }: SalesTogether): Promise<void> {
  const [{ skips }] = await em.execute<[{ skips: boolean }]>(
    "select coalesce(layout_in_force->>'missingMeans' = 'zero', false) as skips from extracts where id = ?", [extractId],
  );
  if (skips) return;
  const range = notes.weeks;
  if (!range) return;
  const isNear = await hasLoadedNear(em, { range, products: [...notes.prices.products.keys()] });
  // A file without gaps far from all others has nothing to be looked at, and most large files are such.
  if (!isNear && notes.keys?.mayHaveGaps() === false) return;
  await em.execute(`
    create temporary table file_pairs on commit drop as
    select product_id, store_id, count(*) as rows, min(week) as first, max(week) as last from ${table} group by product_id, store_id`);
  if (await findSpans(em, { range, isNear })) {
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
/** SQL that the product of a `step` is listed in the store in the week of `day`, or never was. */
const ofStep = "listing.product_id = step.product_id and listing.store_id = step.store_id";
const isListed = `(
  not exists (select from listings listing where ${ofStep})
  or exists (select from listings listing where ${ofStep} and listing.first_day <= day::date + 6 and coalesce(listing.last_day, 'infinity') >= day::date)
)`;

const withinReach = ({ first, last }: WeekRange) => `sales.week between date '${first}' - ${reachDays} and date '${last}' + ${reachDays}`;

/** Whether sales of some of the products are loaded in weeks within reach. */
function hasLoadedNear(em: EntityManager, { range, products }: { range: WeekRange; products: readonly number[] }): Promise<boolean> {
  return exists(
    em,
    `select from json_array_elements_text(?::json) product (id)
     where exists (select from weekly_sales sales where sales.product_id = product.id::integer and ${withinReach(range)})`,
    [JSON.stringify(products)],
  );
}

/** Notes for each pair whose rows do not follow each other week by week from where to where they reach; answers whether there is any. */
async function findSpans(em: EntityManager, { range, isNear }: { range: WeekRange; isNear: boolean }): Promise<boolean> {
  const nearest = (which: "max" | "min", between: string) => (isNear
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
  const any = await exists(em, "select from file_spans");
  if (any) await em.execute("analyze file_spans");
  return any;
}

/**
 * What is missing between rows that follow each other, in the file or loaded, where at least one of the two is the file's. What
 * comes back after more than a year is taken for another season's.
 */
function findGaps(em: EntityManager, { table, range, limit }: { table: string; range: WeekRange; limit: number }): Promise<Gap[]> {
  return em.execute<Gap[]>(`
    with known as (
      select staged.product_id, staged.store_id, staged.week, staged.line
      from file_spans span join ${table} staged on ${sameCell("staged")}
      union all
      select sales.product_id, sales.store_id, sales.week, null
      from file_spans span join weekly_sales sales on ${sameCell("sales")} and sales.week between span.first and span.last and ${withinReach(range)}
    ),
    steps as (
      select *, lag(week) over pair as week_before, lag(line) over pair as line_before
      from (select product_id, store_id, week, min(line) as line from known group by product_id, store_id, week) once
      window pair as (partition by product_id, store_id order by week)
    ),
    absent as (
      select step.product_id, step.store_id, array_agg(day::date order by day) as weeks, (array_agg(coalesce(step.line, step.line_before) order by day))[1] as line
      from (select * from steps where week - week_before between 14 and ${7 * mostWeeksAway} and coalesce(line, line_before) is not null) step
      join stores store on store.id = step.store_id
      cross join lateral generate_series(step.week_before + 7, step.week - 7, interval '7 days') day
      where coalesce(store.opened, '-infinity') <= day::date + 6 and coalesce(store.closed, 'infinity') >= day::date and ${isListed}
      group by step.product_id, step.store_id
    )
    select min(absent.line) as line, store.code as store, (array_agg(product.code order by absent.line))[1] as product,
      count(*)::int as products, array_to_json(absent.weeks) as weeks,
      (sum(count(*) * cardinality(absent.weeks)) over ())::int as rows
    from absent join products product on product.id = absent.product_id join stores store on store.id = absent.store_id
    group by store.code, absent.weeks
    order by line limit ${limit}`);
}
