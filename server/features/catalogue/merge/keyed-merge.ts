import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { lockCatalogue } from "../changes/catalogue-lock.repository";
import { kindOf, type What } from "../changes/record-change";
import type { MergeCounts } from "./merge-counts";

/** How rows of a query go into a table: all names are ours, none comes from a file. */
export type KeyedMerge = {
  table: string;
  /** Query whose columns are `key` and `values`, one row a key. */
  source: string;
  key: readonly string[];
  values: readonly string[];
  history: {
    what: What;
    /** SQL of the code whose history a change belongs to, over a row of the source or the table. */
    code: (row: string) => string;
    /** The values as `describe.ts` names them: names with SQL, over a row of the source or the table. */
    described: (row: string) => Record<string, string>;
  };
};

const listed = (columns: readonly string[], prefix = "") => columns.map((column) => `${prefix}${column}`).join(", ");

const differs = (values: readonly string[], [left, right]: [string, string]) =>
  `(${listed(values, `${left}.`)}) is distinct from (${listed(values, `${right}.`)})`;

const sameKey = (key: readonly string[]) => key.map((column) => `kept.${column} = given.${column}`).join(" and ");

/** How many rows of the source are new to the table, change it, or are there already. */
export async function compareKeyed(em: EntityManager, { table, source, key, values }: KeyedMerge): Promise<MergeCounts> {
  const isNew = `kept.${key[0]} is null`;
  const [row] = await em.execute<[MergeCounts]>(`
    select count(*) filter (where ${isNew})::int as new,
      count(*) filter (where not ${isNew} and ${differs(values, ["kept", "given"])})::int as changed,
      count(*) filter (where not ${isNew} and not ${differs(values, ["kept", "given"])})::int as same
    from (${source}) given
    left join ${table} kept on ${sameKey(key)}`);
  return row;
}

const json = (described: Record<string, string>) => `jsonb_build_object(${Object.entries(described).map(([name, sql]) => `'${name}', ${sql}`).join(", ")})`;

/**
 * Adds the rows that are new and changes those that differ, as the catalogue's only writer until the transaction ends;
 * the others are not written. Each row written leaves an entry in the history, all of them by the one statement.
 */
export async function mergeKeyed(em: EntityManager, { table, source, key, values, history }: KeyedMerge, by: Author): Promise<void> {
  await lockCatalogue(em);
  const { what, code, described } = history;
  await em.execute(
    `with given as materialized (${source}),
     written as materialized (
       select given.*, kept.${key[0]} is null as is_new, case when kept.${key[0]} is not null then ${json(described("kept"))} end as before
       from given left join ${table} kept on ${sameKey(key)}
       where kept.${key[0]} is null or ${differs(values, ["kept", "given"])}
     ),
     merged as (
       insert into ${table} as kept (${listed([...key, ...values])})
       select ${listed([...key, ...values])} from written
       on conflict (${listed(key)}) do update set ${values.map((column) => `${column} = excluded.${column}`).join(", ")}
     )
     insert into audit_entries (at, person_id, token_id, action, subject_kind, subject_id, detail, request_id)
     select now(), ?::uuid, ?::uuid, '${what}.' || case when is_new then 'added' else 'changed' end, '${kindOf[what]}', ${code("written")},
       jsonb_build_object('before', before, 'after', ${json(described("written"))}) || ?::jsonb, ?
     from written order by ${listed(key)}`,
    [by.personId, by.tokenId ?? null, JSON.stringify(by.file ? { file: by.file } : {}), by.requestId ?? null],
  );
}
