import type { EntityManager } from "@mikro-orm/postgresql";
import type { Services } from "../services";
import { JobCancelled, type JobFailure } from "./job-queue";
import type { SendInTransaction } from "./pg-boss-queue";

const heartbeatEveryMs = 2_000;
const progressEveryMs = 250;

type Standing = { done: number; total: number | null; message: string };

/** Thrown by `progress` where the job is no longer this worker's. */
export class LeaseLost extends Error {}

/** A job as the worker that took it knows it. */
export type TakenJob = {
  id: string;
  kind: string;
  attempt: number;
  failures: number;
  payload: Record<string, unknown>;
};

/**
 * A worker's hold on one job. Every write names the attempt, so that a worker which was taken for dead and wakes up
 * again changes nothing.
 */
export class JobLease {
  readonly job: TakenJob;
  readonly #services: Services;
  readonly #heartbeat: NodeJS.Timeout;
  readonly #abort = new AbortController();
  #lastProgress = 0;
  /** How far it is, where that was not written because the last time was just before. */
  #unwritten: Standing | undefined;
  #lost = false;
  #cancelRequested = false;

  constructor(job: TakenJob, services: Services) {
    this.job = job;
    this.#services = services;
    this.#heartbeat = setInterval(() => void this.#beat(), heartbeatEveryMs);
  }

  get signal(): AbortSignal {
    return this.#abort.signal;
  }

  async progress({
    done,
    total = null,
    message = "",
  }: {
    done: number;
    total?: number | null;
    message?: string;
  }): Promise<void> {
    if (this.#lost) throw new LeaseLost();
    if (this.#cancelRequested) throw new JobCancelled();
    const now = Date.now();
    if (now - this.#lastProgress < progressEveryMs && done !== total) {
      this.#unwritten = { done, total, message };
      return;
    }
    this.#lastProgress = now;
    this.#unwritten = undefined;
    const { rows } = await this.#services.pool.query<{ cancel_requested: boolean }>(
      `update jobs set done = $3, total = $4, message = $5, heartbeat_at = now()
       where id = $1 and attempt = $2 and state = 'running' returning cancel_requested`,
      [this.job.id, this.job.attempt, done, total, message.slice(0, 200)],
    );
    if (rows.length === 0) throw new LeaseLost();
    if (rows[0]?.cancel_requested) throw new JobCancelled();
  }

  async succeed(result: Record<string, unknown> | null): Promise<void> {
    await this.#services.pool.query(
      `update jobs set state = 'succeeded', result = $3, error = null, finished_at = now(), done = coalesce(total, done)
       where id = $1 and attempt = $2 and state = 'running'`,
      [this.job.id, this.job.attempt, result],
    );
  }

  /** Ends the job without success; its subject is then to be put right. */
  async finish(state: "failed" | "cancelled", error: JobFailure): Promise<void> {
    await this.#services.pool.query(
      `update jobs set state = $3, error = $4, finished_at = now(), cleanup_pending = true
       where id = $1 and attempt = $2 and state = 'running'`,
      [this.job.id, this.job.attempt, state, error],
    );
  }

  /** Puts the job back into the queue for another try. */
  async requeue(send: SendInTransaction, delaySeconds: number, { failed }: { failed: boolean }): Promise<void> {
    await this.#services.orm.em.fork().transactional(async (em) => {
      await requeueInTransaction(em, { job: this.job, send, delaySeconds, failed });
    });
  }

  /** Another worker may have the job from now on, or soon: `progress` throws, and nothing says it lives. */
  lose(): void {
    this.#lost = true;
    this.end();
    this.#abort.abort(new LeaseLost());
  }

  end(): void {
    clearInterval(this.#heartbeat);
  }

  async #beat(): Promise<void> {
    try {
      const { done, total, message } = this.#unwritten ?? {};
      this.#unwritten = undefined;
      const { rows } = await this.#services.pool.query<{ cancel_requested: boolean }>(
        `update jobs set heartbeat_at = now(), done = coalesce($3, done), total = coalesce($4, total), message = coalesce($5, message)
         where id = $1 and attempt = $2 and state = 'running' returning cancel_requested`,
        [this.job.id, this.job.attempt, done, total, message?.slice(0, 200)],
      );
      if (rows.length === 0) this.lose();
      if (!rows[0]?.cancel_requested || this.#cancelRequested) return;
      this.#cancelRequested = true;
      this.#abort.abort(new JobCancelled());
    } catch (error) {
      this.#services.logger.warn({ err: error, job: this.job.id }, "no sign of life could be written");
    }
  }
}

type Requeue = { job: TakenJob; send: SendInTransaction; delaySeconds: number; failed: boolean };

/** Makes a running job wait again, if this attempt is still the one that counts. */
export async function requeueInTransaction(
  em: EntityManager,
  { job, send, delaySeconds, failed }: Requeue,
): Promise<void> {
  const rows: { id: string }[] = await em.execute(
    `update jobs set state = 'queued', failures = failures + ? where id = ? and attempt = ? and state = 'running' returning id`,
    [failed ? 1 : 0, job.id, job.attempt],
  );
  if (rows.length > 0) await send(em, job.kind, { jobId: job.id, attempt: job.attempt }, delaySeconds);
}
