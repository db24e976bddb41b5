import type { EntityManager } from "@mikro-orm/postgresql";
import { JobEntity, type JobRow } from "./jobs.entities";

export function findJob(em: EntityManager, id: string): Promise<JobRow | null> {
  return em.findOne(JobEntity, { id });
}

export function findJobs(em: EntityManager, ids: readonly string[]): Promise<JobRow[]> {
  return em.find(JobEntity, { id: { $in: [...ids] } });
}

/** Ends a job that waits, and asks one that runs to stop; says whether there was anything left to stop. */
export async function requestCancel(
  em: EntityManager,
  id: string,
  error: { code: string; detail: string },
): Promise<boolean> {
  // In one statement, since a worker may take or end the job at any moment.
  const rows: { id: string }[] = await em.execute(
    `update jobs set
       cancel_requested = true,
       cleanup_pending = state = 'queued',
       error = case when state = 'queued' then ?::jsonb else error end,
       finished_at = case when state = 'queued' then now() else finished_at end,
       state = case when state = 'queued' then 'cancelled' else state end
     where id = ? and state in ('queued', 'running') returning id`,
    [JSON.stringify(error), id],
  );
  return rows.length > 0;
}
