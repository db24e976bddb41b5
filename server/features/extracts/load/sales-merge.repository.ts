import type { ExtractChanges } from "@shared/contract/extracts";
import type { StagedRows } from "../kinds/kind";
import { derivePrices } from "./derived-prices.repository";
import { columns, differs, key, said, salesColumns, sameKey, type WeekRange, within } from "./sales-columns";

/** The price that a row itself tells, and from what; see shared/planning's modelledPrice. */
const ownPrice = `
  case when staged.shelf_price > 0 then staged.shelf_price
    when staged.units > 0 and round(staged.net_sales / staged.units, 4) > 0 then round(staged.net_sales / staged.units, 4) end`;
const ownSource = `
  case when staged.shelf_price > 0 then 'shelf'
    when staged.units > 0 and round(staged.net_sales / staged.units, 4) > 0 then 'paid' else 'unknown' end`;

/**
 * Makes the partitions that staged weeks need. In a transaction of its own: making one shuts readers out until the
 * transaction ends, and a load takes longer than they should wait.
 */
export async function ensurePartitions({ em, table, weeks }: StagedRows & { weeks: readonly string[] | null }): Promise<void> {
  const ofWeeks = weeks && [...new Set(weeks.map((week) => Number(week.slice(0, 4))))].map((year) => `(${year})`).join(", ");
  const years = ofWeeks ? `(values ${ofWeeks}) years (year)` : `(select distinct extract(year from week)::integer as year from ${table}) years`;
  await em.execute(`select ensure_sales_partition(year) from ${years}`);
}

type Merge = StagedRows & { extractId: string; now: Date; changes: ExtractChanges };

/**
 * Puts staged rows into the sales: what they replace goes to the history first; rows that are there already are left
 * alone, and it is noted whose they are. Prices are derived anew wherever the rows bear on them.
 */
export async function mergeSales({ em, table, extractId, now, changes }: Merge): Promise<void> {
  const [first, last] = [changes.weeks[0], changes.weeks.at(-1)];
  if (!first || !last) return;
  const range = { first: first.week, last: last.week };
  if (changes.totals.same > 0) await noteConfirmed({ em, table, extractId, range });
  if (changes.totals.changed > 0) await replaceChanged({ em, table, extractId, now, range });
  const areAllNew = changes.totals.same === 0 && changes.totals.changed === 0;
  if (changes.totals.new > 0) await insertNew({ em, table, extractId, range, areAllNew });
  await derivePrices(em, { touched: table, range });
}

type Ranged = Omit<Merge, "now" | "changes"> & { range: WeekRange };

async function noteConfirmed({ em, table, extractId, range }: Ranged): Promise<void> {
  await em.execute(
    `insert into sales_confirmations (extract_id, confirmed_extract_id, row_count)
     select ?, sales.extract_id, count(*) from ${table} staged join weekly_sales sales on ${sameKey} and ${within(range)}
     where not ${differs} group by sales.extract_id`,
    [extractId],
  );
}

async function replaceChanged({ em, table, extractId, now, range }: Ranged & { now: Date }): Promise<void> {
  await em.execute(
    `insert into weekly_sales_history (${salesColumns.join(", ")}, replaced_by, replaced_at)
     select ${columns(salesColumns, "sales")}, ?, ?
     from ${table} staged join weekly_sales sales on ${sameKey} and ${within(range)} where ${differs}`,
    [extractId, now],
  );
  await em.execute(
    `update weekly_sales sales set ${said.map((name) => `${name} = staged.${name}`).join(", ")},
       price = ${ownPrice}, price_source = ${ownSource}, extract_id = ?
     from ${table} staged where ${sameKey} and ${within(range)} and ${differs}`,
    [extractId],
  );
}

async function insertNew({ em, table, extractId, range, areAllNew }: Ranged & { areAllNew: boolean }): Promise<void> {
  await em.execute(
    `insert into weekly_sales (${[...key, ...said].join(", ")}, price, price_source, extract_id)
     select ${columns([...key, ...said], "staged")}, ${ownPrice}, ${ownSource}, ?
     from ${table} staged
     ${areAllNew ? "" : `where not exists (select from weekly_sales sales where ${sameKey} and ${within(range)})`}`,
    [extractId],
  );
}
