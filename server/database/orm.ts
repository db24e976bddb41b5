import { MikroORM, defineConfig, type Options } from "@mikro-orm/postgresql";
import { Migrator, TSMigrationGenerator } from "@mikro-orm/migrations";
import { fileURLToPath } from "node:url";
import pg from "pg";
import type { Environment } from "../environment";
import { entities } from "./entities";

// A date is a day, not an instant: without this the driver turns it into local midnight.
pg.types.setTypeParser(pg.types.builtins.DATE, (value) => value);

const migrations = fileURLToPath(new URL("../migrations", import.meta.url));

/** Tables that raw SQL in migrations makes; a schema diff that knew them would drop them. */
export const unmappedTables = [
  "user_session", "rate_limits", "weekly_sales", "weekly_sales_history", "sales_confirmations", "incoming_files",
];

/**
 * MikroORM's options for a database address: entities, migrations, and what schema diffs leave alone.
 * With `snapshot` a new migration is the difference to the committed snapshot, not to a database. Running migrations
 * must not write it (it would record the unmapped tables, and the next difference would drop them), so only the
 * command that creates migrations turns it on.
 */
export function ormOptions(databaseUrl: string, { max = 10, snapshot = false } = {}): Options {
  return defineConfig({
    clientUrl: databaseUrl,
    entities,
    pool: { min: 0, max },
    extensions: [Migrator],
    migrations: {
      path: migrations,
      pathTs: migrations,
      glob: "!(*.d).{js,ts}",
      emit: "ts",
      generator: TSMigrationGenerator,
      snapshot,
      snapshotName: ".snapshot",
      disableForeignKeys: false,
    },
    schemaGenerator: {
      skipTables: [...unmappedTables, /^weekly_sales_/],
      ignoreSchema: ["pgboss", "staging"],
      disableForeignKeys: false,
    },
    // Every request and job forks its own context; a global one would leak between them.
    allowGlobalContext: false,
  });
}

/** Connects the ORM. The caller closes it. */
export function createOrm(environment: Pick<Environment, "DATABASE_URL" | "DATABASE_POOL_SIZE">): Promise<MikroORM> {
  return MikroORM.init(ormOptions(environment.DATABASE_URL, { max: environment.DATABASE_POOL_SIZE }));
}

/** Brings the database to the newest migration; safe to call from several processes at once. */
export async function migrate(orm: MikroORM): Promise<void> {
  const em = orm.em.fork();
  await em.transactional(async () => {
    await em.execute("select pg_advisory_xact_lock(hashtext('shelftide migrations'))");
    await orm.getMigrator().up();
  });
}
