import type { ExtractChanges } from "@shared/contract/extracts";
import { getChain } from "../../chain";
import type { StagedRows } from "../kinds/kind";
import { newWeeksBeside } from "./loaded-beside.repository";
import { differs, sameKey, weeksOf, type WeekRange, within } from "./sales-columns";
import { secondLookReasons, type WeekBeside } from "./second-look";

/** What loading would change, by week, and why it should be looked at a second time. */
export async function compareSales({ em, table }: StagedRows): Promise<ExtractChanges> {
  const range = await weeksOf({ em, table });
  if (!range) return { totals: { new: 0, changed: 0, same: 0, missing: 0 }, weeks: [], secondLook: [] };
  const weeks = await weeksBeside({ em, table, range });
  const newWeeks = await newWeeksBeside({ em, table }, weeks.filter(({ loadedRows }) => loadedRows === 0).map(({ week }) => week));
  const { secondLookShare: share } = await getChain(em);
  const total = (count: "new" | "changed" | "same" | "missing") => weeks.reduce((sum, week) => sum + week[count], 0);
  const totals = { new: total("new"), changed: total("changed"), same: total("same"), missing: total("missing") };
  return {
    totals,
    weeks: weeks.map(({ loadedRows: _, loadedUnits: __, ...week }) => week),
    // What a file lacks is no news where the file changes nothing.
    secondLook: totals.new + totals.changed === 0 ? [] : secondLookReasons({ weeks, newWeeks, share }),
  };
}

/** The file's weeks beside what is loaded of them in the stores that the file names. */
function weeksBeside({ em, table, range }: StagedRows & { range: WeekRange }): Promise<WeekBeside[]> {
  return em.execute<WeekBeside[]>(`
    with compared as materialized (
      select staged.week, staged.store_id,
        count(*) filter (where sales.product_id is null) as new,
        count(*) filter (where sales.product_id is not null and ${differs}) as changed,
        count(*) filter (where sales.product_id is not null and not ${differs}) as same,
        sum(sales.units) as units_before, sum(staged.units) as units_after
      from ${table} staged
      left join weekly_sales sales on ${sameKey} and ${within(range)}
      group by staged.week, staged.store_id
    ),
    file as (
      select week, sum(new)::int as new, sum(changed)::int as changed, sum(same)::int as same,
        coalesce(sum(units_before), 0)::float8 as units_before, sum(units_after)::float8 as units_after
      from compared group by week
    ),
    loaded as (
      select sales.week, count(*)::int as rows, sum(sales.units)::float8 as units from weekly_sales sales
      where ${within(range)} and sales.store_id in (select store_id from compared)
      group by sales.week
    )
    select file.week::text as week, new, changed, same, coalesce(loaded.rows, 0) - changed - same as missing,
      units_before as "unitsBefore", units_after as "unitsAfter",
      coalesce(loaded.rows, 0) as "loadedRows", coalesce(loaded.units, 0) as "loadedUnits"
    from file left join loaded on loaded.week = file.week
    order by file.week`);
}
