import { AsyncLocalStorage } from "node:async_hooks";
import type { EntityManager } from "@mikro-orm/postgresql";
import PgBoss from "pg-boss";
import type { Pool, PoolClient } from "pg";
import { JobEntity } from "../features/jobs";
import type { Logger } from "../logger";
import type { JobQueue } from "./job-queue";
import { signalJob } from "./job-signals";
import { JobRunner, defaultTiming, type JobTiming } from "./job-runner";

/** What travels through the queue; everything else is in our own table. */
export type QueuedJob = { jobId: string; attempt: number };

/** A message waits for a worker as long as its job does: after this, pg-boss would drop it. */
const retentionDays = 3650;

/** Puts a job into the queue by the connection of the context's open transaction. */
export type SendInTransaction = (
  em: EntityManager,
  kind: string,
  job: QueuedJob,
  delaySeconds?: number,
) => Promise<void>;

type Means = { pool: Pool; logger: Logger; timing?: JobTiming };

/**
 * The queue over pg-boss: it keeps what waits, in order and with delays, and hands each message to one worker; our
 * `jobs` table says how jobs stand. Retries and the rescue of killed workers' jobs are ours (see JobRunner), because
 * pg-boss knows no sign of life and would either wait for its expiry or give a long job away while it still runs.
 */
export async function createPgBossQueue({ pool, logger, timing = defaultTiming }: Means): Promise<JobQueue> {
  /** The connection under whose lock pg-boss works just now. */
  const locked = new AsyncLocalStorage<PoolClient>();
  const boss = new PgBoss({
    db: { executeSql: (text, values) => (locked.getStore() ?? pool).query(text, values) },
    schedule: false,
  });
  boss.on("error", (error) => logger.error({ err: error }, "queue error"));
  await boss.start();
  const known = new Set<string>();

  const ensureQueue = async (kind: string) => {
    if (known.has(kind)) return;
    await oneAtATime(pool, (client) => locked.run(client, () => boss.createQueue(kind)));
    known.add(kind);
  };

  const send: SendInTransaction = async (em, kind, job, delaySeconds = 0) => {
    await ensureQueue(kind);
    const client = await connectionOf(em);
    const db = { executeSql: (text: string, values: unknown[]) => client.query(text, values) };
    await boss.send(kind, job, { db, startAfter: delaySeconds, retentionDays });
    if (delaySeconds === 0) await signalJob(em, kind);
  };

  const runner = new JobRunner({ boss, send, ensureQueue, timing });

  return {
    async enqueue(em, definition, payload, options = {}) {
      if (options.singletonKey) {
        await em.execute("select pg_advisory_xact_lock(hashtext(?))", [options.singletonKey]);
        const waiting = await em.findOne(JobEntity, {
          singletonKey: options.singletonKey,
          state: { $in: ["queued", "running"] },
        });
        if (waiting) return waiting.id;
      }
      const parsed = definition.payload.parse(payload) as Record<string, unknown>;
      const job = em.create(JobEntity, {
        kind: definition.kind,
        payload: parsed,
        subject: options.subject ?? null,
        createdBy: options.personId ?? null,
        singletonKey: options.singletonKey ?? null,
      });
      await em.persist(job).flush();
      await send(em, definition.kind, { jobId: job.id, attempt: 0 });
      return job.id;
    },
    work: (definitions, services) => runner.start(definitions, services),
    async stop() {
      await runner.stop();
      await boss.stop({ graceful: false, wait: true });
    },
  };
}

/**
 * Processes that start together would lock each other out for good where each makes its queues at the same moment. The work
 * is done by the connection that has the lock: a second one might have to wait for those that wait for the lock.
 */
async function oneAtATime(pool: Pool, work: (client: PoolClient) => Promise<void>): Promise<void> {
  const client = await pool.connect();
  try {
    await client.query("select pg_advisory_lock(hashtext('shelftide queues'))");
    await work(client);
  } finally {
    // Ending the connection gives the lock back whatever happened.
    client.release(true);
  }
}

async function connectionOf(em: EntityManager): Promise<PoolClient> {
  const transaction = em.getTransactionContext<{ client: { acquireConnection: () => Promise<PoolClient> } }>();
  if (!transaction) {
    throw new Error("A job is put into the queue inside a transaction only: wrap it in em.transactional.");
  }
  return transaction.client.acquireConnection();
}
