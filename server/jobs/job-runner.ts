import type PgBoss from "pg-boss";
import { ProblemError } from "../errors";
import { JobEntity } from "../features/jobs";
import type { Services } from "../services";
import type { JobDefinition } from "./job-queue";
import { JobLease, LeaseLost } from "./job-lease";
import { JobCancelled } from "./job-queue";
import type { QueuedJob, SendInTransaction } from "./pg-boss-queue";

/** Without a sign of life for this long a running job is taken to be a killed worker's. */
const deadAfterSeconds = 15;
const rescueEveryMs = 5_000;
const retryDelaysSeconds = [2, 10, 30];

type Parts = { boss: PgBoss; send: SendInTransaction; ensureQueue: (kind: string) => Promise<void> };

/** Runs jobs one at a time per kind, retries what broke down, and rescues what killed workers left behind. */
export class JobRunner {
  readonly #parts: Parts;
  readonly #running = new Map<string, JobLease>();
  #definitions = new Map<string, JobDefinition>();
  #rescue: NodeJS.Timeout | undefined;

  constructor(parts: Parts) {
    this.#parts = parts;
  }

  async start(definitions: readonly JobDefinition[], services: Services): Promise<void> {
    this.#definitions = new Map(definitions.map((definition) => [definition.kind, definition]));
    for (const definition of definitions) {
      await this.#parts.ensureQueue(definition.kind);
      await this.#parts.boss.work<QueuedJob>(definition.kind, { batchSize: 1, pollingIntervalSeconds: 0.5 }, async ([job]) => {
        if (job) await this.#run(definition, job.data, services);
      });
    }
    const rescue = () => this.#rescueAbandoned(services).catch((error) => services.logger.error({ err: error }, "rescue of jobs failed"));
    await rescue();
    this.#rescue = setInterval(rescue, rescueEveryMs);
  }

  /** Takes no further jobs; what still runs after five seconds goes back to the queue. */
  async stop(): Promise<void> {
    clearInterval(this.#rescue);
    await Promise.all([...this.#definitions.keys()].map((kind) => this.#parts.boss.offWork(kind)));
    const patience = Date.now() + 5_000;
    while (this.#running.size > 0 && Date.now() < patience) await new Promise((resolve) => setTimeout(resolve, 50));
    await Promise.all([...this.#running.values()].map((lease) => lease.giveBack(this.#parts.send)));
  }

  async #run(definition: JobDefinition, queued: QueuedJob, services: Services): Promise<void> {
    const lease = await JobLease.take(queued, services);
    // Cancelled before it began, or taken by another worker after a rescue.
    if (!lease) return;
    this.#running.set(lease.jobId, lease);
    const logger = services.logger.child({ job: lease.jobId, kind: definition.kind, attempt: lease.attempt });
    try {
      const result = await definition.run({
        payload: definition.payload.parse(lease.payload),
        jobId: lease.jobId,
        em: services.orm.em.fork(),
        services,
        logger,
        now: services.now(),
        progress: (state) => lease.progress(state),
      });
      await lease.succeed(result ?? null);
    } catch (error) {
      if (error instanceof LeaseLost) logger.warn("job was taken over by another worker");
      else await this.#failed({ definition, lease, services, error });
    } finally {
      lease.end();
      this.#running.delete(lease.jobId);
    }
  }

  async #failed({ definition, lease, services, error }: { definition: JobDefinition; lease: JobLease; services: Services; error: unknown }) {
    if (error instanceof JobCancelled) {
      await lease.finish("cancelled", { code: "cancelled", detail: "Cancelled on request." });
      await this.#giveUp({ definition, payload: lease.payload, services, error: { code: "cancelled", detail: "Cancelled on request." } });
      return;
    }
    services.logger.error({ err: error, job: lease.jobId, kind: definition.kind }, "job failed");
    const retries = definition.retryLimit ?? 2;
    // A problem we name ourselves will be the same next time.
    if (!(error instanceof ProblemError) && lease.attempt <= retries) {
      await lease.requeue(this.#parts.send, retryDelaysSeconds[lease.attempt - 1] ?? 30);
      return;
    }
    const detail = describe(error);
    await lease.finish("failed", detail);
    await this.#giveUp({ definition, payload: lease.payload, services, error: detail });
  }

  async #giveUp(given: { definition: JobDefinition; payload: unknown; services: Services; error: { code: string; detail: string } }) {
    const payload = given.definition.payload.parse(given.payload);
    await given.definition.onGivenUp?.({ payload, services: given.services, error: given.error });
  }

  /** Gives the jobs of workers that were killed to others, or up where no try is left. */
  async #rescueAbandoned(services: Services): Promise<void> {
    const em = services.orm.em.fork();
    const lost: { id: string }[] = await em.execute(
      `select id from jobs where state = 'running' and heartbeat_at < now() - make_interval(secs => ?)`, [deadAfterSeconds],
    );
    for (const { id } of lost) {
      const job = await em.findOneOrFail(JobEntity, { id });
      const definition = this.#definitions.get(job.kind);
      if (!definition) continue;
      const lease = JobLease.adopt(job, services);
      const error = { code: "worker-lost", detail: "The worker that ran this stopped several times before it was done." };
      services.logger.warn({ job: id, kind: job.kind, attempt: job.attempt }, "job of a lost worker");
      if (job.attempt <= (definition.retryLimit ?? 2)) await lease.requeue(this.#parts.send, 0, deadAfterSeconds);
      else if (await lease.finish("failed", error)) await this.#giveUp({ definition, payload: job.payload, services, error });
    }
  }
}

function describe(error: unknown): { code: string; detail: string } {
  if (error instanceof ProblemError) return { code: error.code, detail: error.message };
  return { code: "unexpected", detail: "It broke down for a reason we do not know. Try again; if it happens again, quote the job's id." };
}
