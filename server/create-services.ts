import pg from "pg";
import { createOrm } from "./database/orm";
import type { Environment } from "./environment";
import type { JobTiming } from "./jobs/job-runner";
import { createPgBossQueue } from "./jobs/pg-boss-queue";
import { createLogger } from "./logger";
import type { Services } from "./services";
import { createFileStore } from "./storage/file-store";

/** A request fails sooner than people give up. */
const connectionTimeoutMillis = 10_000;

type Options = { now?: () => Date; jobTiming?: JobTiming };

/** Connects everything a process needs; `closeServices` lets go of it again. */
export async function createServices(environment: Environment, options: Options = {}): Promise<Services> {
  const logger = createLogger(environment.LOG_LEVEL);
  const orm = await createOrm(environment);
  const pool = new pg.Pool({ connectionString: environment.DATABASE_URL, max: environment.DATABASE_POOL_SIZE, connectionTimeoutMillis });
  // A connection that breaks while idle is replaced at the next use.
  pool.on("error", (error) => logger.warn({ err: error }, "database connection lost"));
  // One that breaks while in use says so too, and without a listener that would end the process.
  pool.on("connect", (client) => client.on("error", (error) => logger.warn({ err: error }, "database connection broke in use")));
  const queue = await createPgBossQueue({ pool, logger, timing: options.jobTiming });
  const stopping = new AbortController();
  const files = createFileStore(environment);
  return { environment, logger, orm, pool, files, queue, stopping, now: options.now ?? (() => new Date()) };
}

export async function closeServices(services: Services): Promise<void> {
  services.stopping.abort();
  await services.queue.stop();
  services.files.close();
  await services.orm.close();
  await services.pool.end();
}
