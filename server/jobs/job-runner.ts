import type PgBoss from "pg-boss";
import { setTimeout as sleep } from "node:timers/promises";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import { JobCancelled, defaultRetryLimit, type JobDefinition, type JobFailure } from "./job-queue";
import { JobLease, LeaseLost, type TakenJob } from "./job-lease";
import { JobLocks } from "./job-locks";
import { JobSignals } from "./job-signals";
import type { SendInTransaction } from "./pg-boss-queue";
import { cleanUpJob, rescueJobs } from "./rescue-jobs";
import { takeJob } from "./take-job";

/** Jobs are signalled; this finds those of which the signal was missed, and those that had to wait. */
const pollEveryMs = 500;
/** What was handed back at a stop may take this long to notice. */
const letGoPatienceMs = 2_000;
/** A worker that is stopping holds a job's lock a little longer than the job. */
const lockPatienceMs = 10_000;
const defaultDelaysSeconds = [2, 10, 30];

/** How patient a worker is; tests are less so. */
export type JobTiming = {
  /** Without a sign of life for this long, and with its lock free, a running job is a lost worker's. */
  silentAfterSeconds: number;
  rescueEveryMs: number;
  /** What runs at a stop may take this long to end by itself. */
  stopPatienceMs: number;
};
export const defaultTiming: JobTiming = { silentAfterSeconds: 8, rescueEveryMs: 4_000, stopPatienceMs: 5_000 };

type Parts = {
  boss: PgBoss;
  send: SendInTransaction;
  ensureQueue: (kind: string) => Promise<void>;
  timing: JobTiming;
};

type Repeated = { services: Services; step: () => Promise<boolean>; pause: (signal: AbortSignal) => Promise<void> };
type Means = { services: Services; locks: JobLocks };
type Held = { lease: JobLease; services: Services };

/** Runs jobs one at a time per kind, retries what broke down, and rescues what killed workers left behind. */
export class JobRunner {
  readonly #parts: Parts;
  readonly #running = new Map<string, JobLease>();
  readonly #stopping = new AbortController();
  #loops: Promise<void>[] = [];
  #locks: JobLocks | undefined;
  #signals: JobSignals | undefined;

  constructor(parts: Parts) {
    this.#parts = parts;
  }

  async start(definitions: readonly JobDefinition[], services: Services): Promise<void> {
    const locks = new JobLocks(services.pool, services.logger);
    this.#locks = locks;
    const signals = new JobSignals(services.environment.DATABASE_URL, services.logger);
    this.#signals = signals;
    await signals.open();
    for (const definition of definitions) await this.#parts.ensureQueue(definition.kind);
    const kinds = new Map(definitions.map((definition) => [definition.kind, definition]));
    const { rescueEveryMs, silentAfterSeconds } = this.#parts.timing;
    const rescue = () => rescueJobs({ kinds, services, send: this.#parts.send, silentAfterSeconds });
    this.#loops = [
      this.#repeat({ services, step: rescue, pause: (signal) => pause(rescueEveryMs, signal) }),
      ...definitions.map((definition) =>
        this.#repeat({
          services, step: () => this.#takeAndRun(definition, { services, locks }),
          pause: (signal) => signals.wait(definition.kind, pollEveryMs, signal),
        }),
      ),
    ];
  }

  /** Takes no further jobs; what still runs after some seconds goes back to the queue. */
  async stop(): Promise<void> {
    this.#stopping.abort();
    await this.#signals?.close();
    await this.#untilIdle(this.#parts.timing.stopPatienceMs);
    for (const lease of this.#running.values()) {
      lease.lose();
      await lease.requeue(this.#parts.send, 0, { failed: false });
    }
    await this.#untilIdle(letGoPatienceMs);
    if (this.#running.size === 0) await Promise.all(this.#loops);
    await this.#locks?.close();
  }

  async #untilIdle(patienceMs: number): Promise<void> {
    const until = Date.now() + patienceMs;
    while (this.#running.size > 0 && Date.now() < until) await sleep(50);
  }

  /** Does a step again and again until the stop; at once where it says there is more to do. */
  async #repeat({ services, step, pause: untilNext }: Repeated): Promise<void> {
    const { signal } = this.#stopping;
    while (!signal.aborted) {
      const more = await step().catch((error: unknown) => {
        services.logger.error({ err: error }, "the job queue could not be worked on");
        return false;
      });
      if (!more) await untilNext(signal);
    }
  }

  /** Whether a job was waiting. */
  async #takeAndRun(definition: JobDefinition, { services, locks }: Means): Promise<boolean> {
    const { kind } = definition;
    const taken = await takeJob({ boss: this.#parts.boss, pool: services.pool, kind });
    if (taken === "nothing to do") return false;
    if (taken === "no longer wanted") return true;
    const { job } = taken;
    const lease = new JobLease(job, services);
    this.#running.set(job.id, lease);
    try {
      const isOurs = await locks.take(job.id, { onLost: () => lease.lose(), patienceMs: lockPatienceMs });
      if (isOurs) await this.#run(definition, { lease, services });
      else await lease.requeue(this.#parts.send, 1, { failed: false });
    } finally {
      lease.end();
      this.#running.delete(job.id);
      await locks.release(job.id);
    }
    return true;
  }

  async #run(definition: JobDefinition, { lease, services }: Held): Promise<void> {
    const { job, signal } = lease;
    const logger = services.logger.child({ job: job.id, kind: job.kind, attempt: job.attempt });
    try {
      const result = await definition.run({
        payload: definition.payload.parse(job.payload),
        jobId: job.id,
        em: services.orm.em.fork(),
        services,
        logger,
        now: services.now(),
        signal,
        progress: (state) => lease.progress(state),
      });
      await lease.succeed(result ?? null);
    } catch (error) {
      const isLost = error instanceof LeaseLost || signal.reason instanceof LeaseLost;
      if (isLost) logger.warn("the job is no longer this worker's");
      else await this.#failed(definition, { lease, services, error });
    }
  }

  async #failed(definition: JobDefinition, { lease, services, error }: Held & { error: unknown }): Promise<void> {
    const { job } = lease;
    if (error instanceof JobCancelled || lease.signal.reason instanceof JobCancelled) {
      await lease.finish("cancelled", { code: "cancelled", detail: "Cancelled on request." });
    } else {
      const about = { err: error, job: job.id, kind: job.kind };
      if (error instanceof ProblemError) services.logger.info(about, "job met a problem");
      else services.logger.error(about, "job failed");
      if (mayTryAgain(definition, job, error)) {
        await lease.requeue(this.#parts.send, delaySecondsOf(definition, job), { failed: true });
        return;
      }
      await lease.finish("failed", describe(error));
    }
    await cleanUpJob({ id: job.id, definition, services });
  }
}

/** Woken early by the stop, which rejects. */
const pause = (ms: number, signal: AbortSignal): Promise<void> => sleep(ms, undefined, { signal }).catch(() => undefined);

/** A problem we name ourselves will be the same next time, unless it says that it passes. */
function mayTryAgain(definition: JobDefinition, job: TakenJob, error: unknown): boolean {
  const mayPass = !(error instanceof ProblemError) || error.isPassing;
  return mayPass && job.failures < (definition.retryLimit ?? defaultRetryLimit);
}

function delaySecondsOf(definition: JobDefinition, job: TakenJob): number {
  const delays = definition.retryDelaysSeconds ?? defaultDelaysSeconds;
  return delays[job.failures] ?? delays.at(-1) ?? 0;
}

function describe(error: unknown): JobFailure {
  if (error instanceof ProblemError) return { code: error.code, detail: error.message };
  const detail = "It broke down for a reason we do not know. Try again; if it happens again, quote the job's id.";
  return { code: "unexpected", detail };
}
