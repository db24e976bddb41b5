import { join } from "node:path";
import type pg from "pg";
import { mustRun } from "../../../infra/lib/run-program.mjs";
import { ensurePostgres } from "../../../infra/lib/postgres/programs.mjs";

type Yardstick = { pool: pg.Pool; databaseUrl: string; file: string; rows: number; stopping: AbortSignal };

const columns = "week, store_id, product_id, units, net_sales, regular_price, shelf_price, feature, display, mechanic";

/**
 * Milliseconds, by psql's own clock, of a \copy of the rows into a table like `weekly_sales`: its columns, key, index and
 * partitions by year. What the file does not tell stands in the table as its default, so the rows are as wide as ours.
 */
export async function timeCopy({ pool, databaseUrl, file, rows, stopping }: Yardstick): Promise<number> {
  const [programs] = await ensurePostgres({ say: (line) => console.error(line), stopping });
  await makeTable(pool);
  const { hostname, port, username, password, pathname } = new URL(databaseUrl);
  const output = await mustRun({
    program: join(programs, "psql"),
    args: ["--no-psqlrc", "--quiet", "--set=ON_ERROR_STOP=1", "--command=\\timing on", `--command=\\copy yardstick (${columns}) from '${file}' (format csv)`],
    env: { PATH: process.env.PATH, LC_ALL: "C", PGHOST: hostname, PGPORT: port, PGUSER: username, PGPASSWORD: decodeURIComponent(password), PGDATABASE: pathname.slice(1) },
    stopping, failure: (text) => `\\copy did not go: ${text}`,
  });
  const { rows: [{ count }] } = await pool.query<{ count: number }>("select count(*)::int as count from yardstick");
  if (count !== rows) throw new Error(`\\copy brought ${count} rows, not ${rows}.`);
  await pool.query("drop table yardstick");
  return Number(/Time: ([\d.]+) ms/.exec(output)?.[1] ?? Number.NaN);
}

async function makeTable(pool: pg.Pool): Promise<void> {
  await pool.query("drop table if exists yardstick");
  await pool.query("create table yardstick (like weekly_sales including all) partition by range (week)");
  await pool.query(`alter table yardstick alter price set default 2.49, alter price_source set default 'shelf'`);
  await pool.query(`alter table yardstick alter extract_id set default '00000000-0000-4000-8000-000000000000'`);
  for (const year of [2023, 2024, 2025, 2026]) {
    await pool.query(`create table yardstick_${year} partition of yardstick for values from ('${year}-01-01') to ('${year + 1}-01-01')`);
  }
}
