import { randomBytes } from "node:crypto";
import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createCluster, databaseUrl, dataOf, ensureDatabase, startCluster, stopCluster, type Cluster } from "../../../infra/lib/postgres/cluster.mjs";
import { pickPort } from "../../../infra/lib/ports.mjs";
import { asPostgresUser } from "../../../infra/lib/postgres/postgres-user.mjs";
import { ensurePostgres } from "../../../infra/lib/postgres/programs.mjs";
import { mustRun } from "../../../infra/lib/run-program.mjs";

const say = () => undefined;
const { signal: stopping } = new AbortController();

/** A database server that a test may break. */
export type OwnCluster = {
  url: string;
  /** Ends it without a goodbye, as a failing machine does, and starts it again. */
  breakDown: () => Promise<void>;
  remove: () => Promise<void>;
};

export async function startOwnCluster(): Promise<OwnCluster> {
  const [programs] = await ensurePostgres({ say, stopping });
  const folder = mkdtempSync(join(tmpdir(), "shelftide-own-"));
  chmodSync(folder, 0o711);
  const cluster: Cluster = { home: join(folder, "postgres"), programs: programs ?? "", port: await pickPort({}), password: randomBytes(16).toString("hex"), durable: false };
  await createCluster(cluster, stopping);
  await startCluster(cluster, { stopping, say });
  await ensureDatabase(cluster, stopping, { mayCreateDatabases: true });
  return {
    url: databaseUrl(cluster, "postgres"),
    async breakDown() {
      const stop = asPostgresUser(join(cluster.programs, "pg_ctl"), ["-D", dataOf(cluster), "-m", "immediate", "-w", "stop"]);
      await mustRun({ ...stop, cwd: cluster.home, stopping, failure: (output: string) => `PostgreSQL did not stop: ${output}` });
      await startCluster(cluster, { stopping, say });
    },
    async remove() {
      await stopCluster(cluster);
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
