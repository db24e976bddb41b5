import pg from "pg";

/** Something in the database that whoever comes to it must wait for. */
export type Barrier = { someoneWaits: () => Promise<boolean>; lift: () => Promise<void> };

/** Stops whoever writes that a job of a kind has succeeded. */
export async function barrierAtSuccess(databaseUrl: string, kind: string): Promise<Barrier> {
  const client = new pg.Client({ connectionString: databaseUrl });
  client.on("error", () => undefined);
  await client.connect();
  await client.query("select pg_advisory_lock(815)");
  await client.query(`
    create or replace function stop_at_success() returns trigger language plpgsql as $$
    begin
      perform pg_advisory_xact_lock_shared(815);
      return new;
    end $$;
    create or replace trigger stop_at_success before update on jobs for each row
    when (new.state = 'succeeded' and new.kind = '${kind}') execute function stop_at_success()`);
  let isLifted = false;
  return {
    async someoneWaits() {
      const { rows } = await client.query("select 1 from pg_locks where locktype = 'advisory' and objid = 815 and not granted");
      return rows.length > 0;
    },
    async lift() {
      if (isLifted) return;
      isLifted = true;
      await client.query("drop trigger stop_at_success on jobs").catch(() => undefined);
      await client.end().catch(() => undefined);
    },
  };
}

/** Locks a table in a mode until it is lifted: "share" stops those who write, "access exclusive" also those who read. */
export async function barrierAt(databaseUrl: string, { table, mode }: { table: string; mode: "share" | "access exclusive" }): Promise<Barrier> {
  const client = new pg.Client({ connectionString: databaseUrl });
  // A restart of the server lifts it too.
  client.on("error", () => undefined);
  await client.connect();
  await client.query(`begin; lock table ${table} in ${mode} mode`);
  let isLifted = false;
  return {
    async someoneWaits() {
      const { rows } = await client.query(`select 1 from pg_locks where relation = '${table}'::regclass and not granted`);
      return rows.length > 0;
    },
    async lift() {
      if (isLifted) return;
      isLifted = true;
      await client.end().catch(() => undefined);
    },
  };
}
