import type { EntityManager } from "@mikro-orm/postgresql";
import type { MergeCounts } from "./merge-counts";

/** How rows of a query go into a table: all names are ours, none comes from a file. */
export type KeyedMerge = {
  table: string;
  /** Query whose columns are `key` and `values`, one row a key. */
  source: string;
  key: readonly string[];
  values: readonly string[];
};

const listed = (columns: readonly string[], prefix = "") => columns.map((column) => `${prefix}${column}`).join(", ");

const differs = (values: readonly string[], [left, right]: [string, string]) =>
  `(${listed(values, `${left}.`)}) is distinct from (${listed(values, `${right}.`)})`;

/** How many rows of the source are new to the table, change it, or are there already. */
export async function compareKeyed(em: EntityManager, { table, source, key, values }: KeyedMerge): Promise<MergeCounts> {
  const isNew = `kept.${key[0]} is null`;
  const [row] = await em.execute<[MergeCounts]>(`
    select count(*) filter (where ${isNew})::int as new,
      count(*) filter (where not ${isNew} and ${differs(values, ["kept", "given"])})::int as changed,
      count(*) filter (where not ${isNew} and not ${differs(values, ["kept", "given"])})::int as same
    from (${source}) given
    left join ${table} kept on ${key.map((column) => `kept.${column} = given.${column}`).join(" and ")}`);
  return row;
}

/** Adds the rows that are new and changes those that differ; the others are not written. */
export async function mergeKeyed(em: EntityManager, { table, source, key, values }: KeyedMerge): Promise<void> {
  await em.execute(`
    insert into ${table} as kept (${listed([...key, ...values])})
    select ${listed([...key, ...values])} from (${source}) given
    on conflict (${listed(key)}) do update set ${values.map((column) => `${column} = excluded.${column}`).join(", ")}
    where ${differs(values, ["kept", "excluded"])}`);
}
