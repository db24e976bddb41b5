import type { JobRow } from "../features/jobs";
import type { Services } from "../services";
import { JobCancelled } from "./job-queue";
import type { QueuedJob, SendInTransaction } from "./pg-boss-queue";

const heartbeatEveryMs = 3_000;
const progressEveryMs = 250;

/** Thrown by `progress` where another worker has taken the job over. */
export class LeaseLost extends Error {}

type Held = { jobId: string; attempt: number; kind: string; payload: Record<string, unknown> };

/**
 * A worker's hold on one job. Every write names the attempt, so that a worker which was taken for dead and wakes up
 * again changes nothing.
 */
export class JobLease {
  readonly jobId: string;
  readonly attempt: number;
  readonly kind: string;
  readonly payload: Record<string, unknown>;
  readonly #services: Services;
  #heartbeat: NodeJS.Timeout | undefined;
  #lastProgress = 0;
  #lost = false;

  private constructor(held: Held, services: Services) {
    this.jobId = held.jobId;
    this.attempt = held.attempt;
    this.kind = held.kind;
    this.payload = held.payload;
    this.#services = services;
  }

  /** Takes a queued job; undefined where it was cancelled or is another worker's by now. */
  static async take(queued: QueuedJob, services: Services): Promise<JobLease | undefined> {
    const { rows } = await services.pool.query<{ kind: string; payload: Record<string, unknown>; attempt: number }>(
      `update jobs set state = 'running', attempt = attempt + 1, heartbeat_at = now(), started_at = coalesce(started_at, now())
       where id = $1 and attempt = $2 and state = 'queued' returning kind, payload, attempt`,
      [queued.jobId, queued.attempt],
    );
    const [row] = rows;
    if (!row) return undefined;
    const lease = new JobLease({ jobId: queued.jobId, ...row }, services);
    lease.#heartbeat = setInterval(() => void lease.#beat(), heartbeatEveryMs);
    return lease;
  }

  /** Holds a lost worker's job for as long as it takes to queue or end it. */
  static adopt(job: JobRow, services: Services): JobLease {
    return new JobLease({ jobId: job.id, attempt: job.attempt, kind: job.kind, payload: job.payload }, services);
  }

  async progress({ done, total = null, message = "" }: { done: number; total?: number | null; message?: string }): Promise<void> {
    if (this.#lost) throw new LeaseLost();
    const now = Date.now();
    if (now - this.#lastProgress < progressEveryMs && done !== total) return;
    this.#lastProgress = now;
    const { rows } = await this.#services.pool.query<{ cancel_requested: boolean }>(
      `update jobs set done = $3, total = $4, message = $5, heartbeat_at = now()
       where id = $1 and attempt = $2 and state = 'running' returning cancel_requested`,
      [this.jobId, this.attempt, done, total, message.slice(0, 200)],
    );
    if (rows.length === 0) throw new LeaseLost();
    if (rows[0]?.cancel_requested) throw new JobCancelled();
  }

  async succeed(result: Record<string, unknown> | null): Promise<void> {
    await this.#services.pool.query(
      `update jobs set state = 'succeeded', result = $3, error = null, finished_at = now(), done = coalesce(total, done)
       where id = $1 and attempt = $2 and state = 'running'`,
      [this.jobId, this.attempt, result],
    );
  }

  /** Ends the job; false where it was no longer this lease's. */
  async finish(state: "failed" | "cancelled", error: { code: string; detail: string }): Promise<boolean> {
    const { rowCount } = await this.#services.pool.query(
      `update jobs set state = $3, error = $4, finished_at = now() where id = $1 and attempt = $2 and state = 'running'`,
      [this.jobId, this.attempt, state, error],
    );
    return rowCount === 1;
  }

  /** Puts the job back into the queue; with `ifSilentForSeconds` only when no sign of life came meanwhile. */
  async requeue(send: SendInTransaction, delaySeconds: number, ifSilentForSeconds = -1): Promise<void> {
    const em = this.#services.orm.em.fork();
    await em.transactional(async (inner) => {
      const rows = await inner.execute(
        `update jobs set state = 'queued' where id = ? and attempt = ? and state = 'running'
         and (? < 0 or heartbeat_at < now() - make_interval(secs => ?)) returning id`,
        [this.jobId, this.attempt, ifSilentForSeconds, Math.max(0, ifSilentForSeconds)],
      );
      if (rows.length > 0) await send(inner, this.kind, { jobId: this.jobId, attempt: this.attempt }, delaySeconds);
    });
  }

  /** Hands a running job back when the process stops: it begins again elsewhere. */
  async giveBack(send: SendInTransaction): Promise<void> {
    this.end();
    this.#lost = true;
    await this.requeue(send, 0);
  }

  end(): void {
    clearInterval(this.#heartbeat);
  }

  async #beat(): Promise<void> {
    try {
      const { rowCount } = await this.#services.pool.query(
        `update jobs set heartbeat_at = now() where id = $1 and attempt = $2 and state = 'running'`, [this.jobId, this.attempt],
      );
      if (rowCount === 0) this.#lost = true;
    } catch (error) {
      this.#services.logger.warn({ err: error, job: this.jobId }, "no sign of life could be written");
    }
  }
}
