import type { MikroORM } from "@mikro-orm/postgresql";
import type { Pool } from "pg";
import type { Environment } from "./environment";
import type { JobQueue } from "./jobs/job-queue";
import type { Logger } from "./logger";
import type { FileStore } from "./storage/file-store";

/** What a process is made of; built once by `main.ts`, `worker.ts` or a test, and handed down. */
export type Services = {
  environment: Environment;
  logger: Logger;
  orm: MikroORM;
  /** For what lives outside the ORM: sessions, throttling, the queue. */
  pool: Pool;
  files: FileStore;
  queue: JobQueue;
  /** Fires when the process is told to stop, so that what waits or streams can end. */
  stopping: AbortController;
  /** "Now" comes in as a value, so that tests can set it. */
  now: () => Date;
};
