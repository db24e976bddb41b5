import type { EntityManager } from "@mikro-orm/postgresql";
import type { CatalogueChange, HistoryKind } from "@shared/contract/catalogue-history";
import type { Values, What } from "../changes/record-change";

/** An entry of the audit trail that is about the catalogue. */
export type StoredChange = {
  id: number;
  at: Date;
  personId: string | null;
  personName: string | null;
  byToken: boolean;
  action: `${What}.${CatalogueChange["change"]}`;
  code: string;
  detail: { before: Values | null; after: Values | null; file?: { id: string; name: string } };
};

/** The entries that `recordChange` and the merges write. */
const isChange = "entry.action ~ '^(store|product|category|terms|funding|listing|event|temperature)\\.(added|changed|removed)$'";

type Wanted = { kind: HistoryKind; code?: string; before?: number; limit: number };

/** Changes of a kind, newest first, from before an entry on; one more than the limit where there are more. */
export async function findChanges(em: EntityManager, { kind, code, before, limit }: Wanted): Promise<StoredChange[]> {
  return em.execute<StoredChange[]>(
    `select entry.id::float8 as id, entry.at, entry.person_id as "personId", person.name as "personName",
       entry.token_id is not null as "byToken", entry.action, entry.subject_id as code, entry.detail
     from audit_entries entry left join people person on person.id = entry.person_id
     where entry.subject_kind = ? ${code === undefined ? "" : "and entry.subject_id = ?"} ${before === undefined ? "" : "and entry.id < ?"} and ${isChange}
     order by entry.id desc limit ?`,
    [kind, ...(code === undefined ? [] : [code]), ...(before === undefined ? [] : [before]), limit + 1],
  );
}

/** Who changed such a thing of a code last, and when; null where it is not on record. */
export async function findLastChange(em: EntityManager, { kind, what, code }: { kind: HistoryKind; what: What; code: string }): Promise<{ name: string; at: Date } | null> {
  const [last] = await em.execute<{ name: string; at: Date | string }[]>(
    `select coalesce(person.name, 'Shelftide') as name, entry.at from audit_entries entry left join people person on person.id = entry.person_id
     where entry.subject_kind = ? and entry.subject_id = ? and entry.action in (?, ?, ?) order by entry.id desc limit 1`,
    [kind, code, `${what}.added`, `${what}.changed`, `${what}.removed`],
  );
  return last === undefined ? null : { name: last.name, at: new Date(last.at) };
}
