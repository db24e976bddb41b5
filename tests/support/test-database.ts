import { randomUUID } from "node:crypto";
import pg from "pg";
import { createOrm, migrate } from "../../server/database/orm";

/** Address of the throw-away cluster's maintenance database; `npm test` starts the cluster and passes it. */
export function clusterUrl(): string {
  const url = process.env.TEST_DATABASE_URL;
  if (!url) throw new Error("TEST_DATABASE_URL is not set: run the tests by npm test (or npm test -- api).");
  return url;
}

const templateName = "shelftide_template";

/** A database copied from the migrated template, which the first to need it makes. Drop it with `drop`. */
export async function createTestDatabase(): Promise<{ url: string; drop: () => Promise<void> }> {
  const admin = new pg.Client({ connectionString: clusterUrl() });
  await admin.connect();
  const name = `test_${randomUUID().replaceAll("-", "")}`;
  try {
    await admin.query("select pg_advisory_lock(742)");
    await ensureTemplate(admin);
    await admin.query(`create database ${name} template ${templateName}`);
    await admin.query("select pg_advisory_unlock(742)");
  } finally {
    await admin.end();
  }
  return { url: databaseUrl(name), drop: () => drop(name) };
}

function databaseUrl(name: string): string {
  const url = new URL(clusterUrl());
  url.pathname = `/${name}`;
  return url.href;
}

async function ensureTemplate(admin: pg.Client): Promise<void> {
  const { rowCount } = await admin.query("select 1 from pg_database where datname = $1 and datistemplate", [templateName]);
  if (rowCount) return;
  await admin.query(`drop database if exists ${templateName}`);
  await admin.query(`create database ${templateName}`);
  const orm = await createOrm({ DATABASE_URL: databaseUrl(templateName), DATABASE_POOL_SIZE: 2 });
  await migrate(orm);
  await orm.close();
  await admin.query(`alter database ${templateName} is_template true`);
}

async function drop(name: string): Promise<void> {
  const admin = new pg.Client({ connectionString: clusterUrl() });
  await admin.connect();
  await admin.query(`drop database if exists ${name} with (force)`);
  await admin.end();
}
