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
export const unmappedTables = ["user_session", "rate_limits", "weekly_sales", "weekly_sales_history", "extract_rows"];

/** MikroORM's options for a database address: entities, migrations, and what schema diffs leave alone. */
export function ormOptions(databaseUrl: string, pool: { max: number } = { max: 10 }): Options {
  return defineConfig({
    clientUrl: databaseUrl,
    entities,
    pool: { min: 0, max: pool.max },
    extensions: [Migrator],
    migrations: {
      path: migrations,
      pathTs: migrations,
      glob: "!(*.d).{js,ts}",
      emit: "ts",
      generator: TSMigrationGenerator,
      snapshotName: ".snapshot",
      disableForeignKeys: false,
    },
    schemaGenerator: {
      skipTables: [...unmappedTables, /^weekly_sales_/],
      ignoreSchema: ["pgboss"],
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
