import type { EntityManager } from "@mikro-orm/postgresql";

/** Longer than any upload takes. */
const abandonedAfterHours = 48;

/** Notes that a file is on its way into the store, before its first byte is, so that a killed process leaves a trace. */
export async function noteIncoming(em: EntityManager, { storageKey, now }: { storageKey: string; now: Date }): Promise<void> {
  await em.execute("insert into incoming_files (storage_key, begun_at) values (?, ?)", [storageKey, now]);
}

/** The file is an extract's now, or gone. */
export async function forgetIncoming(em: EntityManager, storageKey: string): Promise<void> {
  await em.execute("delete from incoming_files where storage_key = ?", [storageKey]);
}

/** Keys of files that never became an extract's. */
export async function abandonedFiles(em: EntityManager, now: Date): Promise<string[]> {
  const rows = await em.execute<{ key: string }[]>(
    "select storage_key as key from incoming_files where begun_at < ?::timestamptz - make_interval(hours => ?) order by begun_at limit 100",
    [now, abandonedAfterHours],
  );
  return rows.map(({ key }) => key);
}
