import type { EntityManager } from "@mikro-orm/postgresql";
import { derivePrices } from "./derived-prices.repository";
import { key, salesColumns, within } from "./sales-columns";

/** How many rows of an extract were replaced by one that was loaded later. */
export async function countReplaced(em: EntityManager, extractId: string): Promise<{ rows: number; by: string | null }> {
  const [row] = await em.execute<[{ rows: number; by: string | null }]>(
    `select count(*)::int as rows, min(later.file_name) as by from weekly_sales_history history
     join extracts later on later.id = history.replaced_by where history.extract_id = ?`,
    [extractId],
  );
  return row;
}

/** How many rows of an extract a later one holds too, unchanged. */
export async function countConfirmed(em: EntityManager, extractId: string): Promise<{ rows: number; by: string | null }> {
  const [row] = await em.execute<[{ rows: number; by: string | null }]>(
    `select coalesce(sum(row_count), 0)::int as rows, min(later.file_name) as by from sales_confirmations confirmation
     join extracts later on later.id = confirmation.extract_id where confirmation.confirmed_extract_id = ?`,
    [extractId],
  );
  return row;
}

type Loaded = { id: string; firstWeek: string; lastWeek: string };

/** Puts back what was there before an extract was loaded; its rows that replaced nothing are removed. */
export async function restoreBefore(em: EntityManager, { id: extractId, firstWeek, lastWeek }: Loaded): Promise<void> {
  const weeks = within({ first: firstWeek, last: lastWeek });
  const ofExtract = `sales.extract_id = ? and ${weeks}`;
  const restored = salesColumns.filter((name) => !key.includes(name));
  await em.execute(
    `create temporary table withdrawn_rows on commit drop as
     select product_id, week from weekly_sales sales where ${ofExtract}`,
    [extractId],
  );
  await em.execute("analyze withdrawn_rows");
  await em.execute(
    `update weekly_sales sales set ${restored.map((name) => `${name} = history.${name}`).join(", ")}
     from weekly_sales_history history
     where history.replaced_by = ? and ${key.map((name) => `sales.${name} = history.${name}`).join(" and ")} and ${weeks}`,
    [extractId],
  );
  await em.execute(`delete from weekly_sales sales where ${ofExtract}`, [extractId]);
  await em.execute("delete from weekly_sales_history where replaced_by = ?", [extractId]);
  await em.execute("delete from sales_confirmations where extract_id = ?", [extractId]);
  await derivePrices(em, { touched: "withdrawn_rows", range: { first: firstWeek, last: lastWeek } });
  await em.execute("drop table withdrawn_rows");
}
