import { JobEntity, type JobRow } from "../../server/features/jobs";
import type { EnqueueOptions, JobDefinition } from "../../server/jobs/job-queue";
import type { Services } from "../../server/services";
import type { z } from "zod";

/** Adds a job in a transaction of its own. */
export function enqueue<Schema extends z.ZodType>(
  services: Services,
  definition: JobDefinition<Schema>,
  payload: z.input<Schema>,
  options?: EnqueueOptions,
): Promise<string> {
  return services.orm.em.fork().transactional((em) => services.queue.enqueue(em, definition, payload, options));
}

/** Waits until a job is as wanted, and answers it. */
export async function waitForJob(
  services: Services,
  id: string,
  wanted: (job: JobRow) => boolean,
  patienceMs = 20_000,
): Promise<JobRow> {
  const until = Date.now() + patienceMs;
  for (;;) {
    const job = await services.orm.em.fork().findOneOrFail(JobEntity, { id });
    if (wanted(job)) return job;
    if (Date.now() > until) {
      throw new Error(
        `The job is still ${job.state} (try ${job.attempt}, ${job.done} done): ${JSON.stringify(job.error)}`,
      );
    }
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

export const hasEnded = (job: JobRow): boolean => job.finishedAt !== null;
