import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import { conflict } from "../../../errors";

/** A table of spans of days, and the columns of what must not have two that share a day. */
export type Spans = { table: "listings" | "product_funding"; of: readonly string[]; staged: string };

const same = (of: readonly string[], [left, right]: [string, string]) => of.map((column) => `${left}.${column} = ${right}.${column}`).join(" and ");

/** SQL that two spans share a day. */
const shares = ([left, right]: [string, string]) =>
  `${left}.first_day <= coalesce(${right}.last_day, 'infinity') and ${right}.first_day <= coalesce(${left}.last_day, 'infinity')`;

/**
 * SQL of staged rows (their `line`) that share days with others, of the file or of the table as it will be after the
 * merge, with the days of the earliest of those as `taken`.
 */
export function sharedDaysSql({ table, of, staged }: Spans): string {
  const columns = [...of, "first_day", "last_day"].join(", ");
  const whole = [...of, "first_day"];
  return `
    select given.line, min('from ' || other.first_day || coalesce(' to ' || other.last_day, ' on')) as taken
    from ${staged} given
    join (
      select ${columns} from ${staged}
      union all
      select ${columns} from ${table} kept where not exists (select from ${staged} given where ${same(whole, ["given", "kept"])})
    ) other on ${same(of, ["given", "other"])} and other.first_day <> given.first_day and ${shares(["given", "other"])}
    group by given.line`;
}

/**
 * Sees to it that no two rows share a day after a merge: since the check of its file someone may have entered others.
 *
 * @throws ProblemError 409.
 */
export async function refuseSharedDays(em: EntityManager, spans: Spans): Promise<void> {
  if (!(await exists(em, sharedDaysSql(spans)))) return;
  throw conflict("check-outdated", "Since the check the catalogue has changed: rows of the file share days with others now. Check the file again, look at the list, and load it then.");
}
