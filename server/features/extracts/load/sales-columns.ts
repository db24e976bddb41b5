import type { StagedRows } from "../kinds/kind";

/** What stands for a store-week. */
export const key = ["product_id", "store_id", "week"];

/** What a file says of a store-week; the price modelled is derived from it. */
export const said = [
  "units", "net_sales", "regular_price", "shelf_price", "feature", "display", "mechanic",
  "promotion_days", "open_days", "stock_out_days", "unit_cost", "temperature_c", "event",
];

/** Every column of the sales, and of their history. */
export const salesColumns = [...key, ...said, "price", "price_source", "extract_id"];

export type WeekRange = { first: string; last: string };

/**
 * SQL that the table `sales` lies within these weeks. As literals, so that the planner looks into their partitions only;
 * the weeks come from the database, never from a file's text.
 */
export const within = ({ first, last }: WeekRange) => `sales.week between date '${first}' and date '${last}'`;

export const columns = (names: readonly string[], alias: string) => names.map((name) => `${alias}.${name}`).join(", ");

/** SQL that `sales` and `staged` stand for the same store-week of a product, and that they say different things of it. */
export const sameKey = key.map((name) => `sales.${name} = staged.${name}`).join(" and ");
export const differs = `(${columns(said, "sales")}) is distinct from (${columns(said, "staged")})`;

/** First and last week of staged rows; undefined where there are none. */
export async function weeksOf({ em, table }: StagedRows): Promise<WeekRange | undefined> {
  const [row] = await em.execute<[{ first: string | null; last: string | null }]>(
    `select min(week)::text as first, max(week)::text as last from ${table}`,
  );
  return row.first === null || row.last === null ? undefined : { first: row.first, last: row.last };
}
