import type { EntityManager } from "@mikro-orm/postgresql";
import type { Services } from "../services";
import { requeueInTransaction, type TakenJob } from "./job-lease";
import { defaultRetryLimit, type JobDefinition, type JobFailure } from "./job-queue";
import type { SendInTransaction } from "./pg-boss-queue";

type Rescue = {
  kinds: ReadonlyMap<string, JobDefinition>;
  services: Services;
  send: SendInTransaction;
  silentAfterSeconds: number;
};

/**
 * Gives the jobs of workers that were killed to others, or up where no try is left, and puts right what ended without
 * success where nobody has yet. Never says that there is more to do at once.
 */
export async function rescueJobs({ kinds, services, send, silentAfterSeconds }: Rescue): Promise<false> {
  const known = [...kinds.keys()];
  const silent = await services.pool.query<TakenJob>(
    `select id, kind, attempt, failures, payload from jobs
     where state = 'running' and kind = any($1) and heartbeat_at < now() - make_interval(secs => $2)`,
    [known, silentAfterSeconds],
  );
  for (const job of silent.rows) {
    const em = services.orm.em.fork();
    await em.transactional((inner) => rescueOne(inner, { job, definition: kinds.get(job.kind), services, send }));
  }
  const pending = await services.pool.query<{ id: string; kind: string }>(
    "select id, kind from jobs where cleanup_pending and kind = any($1)",
    [known],
  );
  for (const { id, kind } of pending.rows) await cleanUpJob({ id, definition: kinds.get(kind), services });
  return false;
}

type Lost = { job: TakenJob; definition: JobDefinition | undefined; services: Services; send: SendInTransaction };

async function rescueOne(em: EntityManager, { job, definition, services, send }: Lost): Promise<void> {
  // Held while any process that runs the job lives, however busy it is.
  const [lock]: { free: boolean }[] = await em.execute(
    "select pg_try_advisory_xact_lock(hashtextextended(?, 0)) as free",
    [job.id],
  );
  if (!lock?.free) return;
  services.logger.warn({ job: job.id, kind: job.kind, attempt: job.attempt }, "job of a lost worker");
  if (job.failures < (definition?.retryLimit ?? defaultRetryLimit)) {
    await requeueInTransaction(em, { job, send, delaySeconds: 0, failed: true });
    return;
  }
  const error: JobFailure = {
    code: "worker-lost",
    detail: "The worker that ran this stopped several times before it was done.",
  };
  await em.execute(
    `update jobs set state = 'failed', error = ?, finished_at = now(), cleanup_pending = true
     where id = ? and attempt = ? and state = 'running'`,
    [JSON.stringify(error), job.id, job.attempt],
  );
}

type CleanUp = { id: string; definition: JobDefinition | undefined; services: Services };

/** Has a given-up job's subject put right, by one worker at a time; where that fails, it is tried again later. */
export async function cleanUpJob({ id, definition, services }: CleanUp): Promise<void> {
  try {
    await services.orm.em.fork().transactional(async (em) => {
      const [job]: { payload: unknown; error: JobFailure }[] = await em.execute(
        "select payload, error from jobs where id = ? and cleanup_pending for update skip locked",
        [id],
      );
      if (!job) return;
      const payload = definition?.payload.safeParse(job.payload);
      if (payload?.success) await definition?.onGivenUp?.({ payload: payload.data, services, error: job.error });
      await em.execute("update jobs set cleanup_pending = false where id = ?", [id]);
    });
  } catch (error) {
    services.logger.error({ err: error, job: id }, "what a given-up job left behind could not be put right yet");
  }
}
