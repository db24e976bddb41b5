import type { Job } from "@shared/contract/jobs";
import type { JobRow } from "./jobs.entities";

export function presentJob(row: JobRow): Job {
  const { id, kind, state, done, total, message, subject, result, error, attempt } = row;
  return {
    id,
    kind,
    state,
    progress: { done, total: total ?? null, message },
    subject: subject ?? null,
    result: result ?? null,
    error: error ?? null,
    attempt,
    createdAt: row.createdAt.toISOString(),
    startedAt: row.startedAt?.toISOString() ?? null,
    finishedAt: row.finishedAt?.toISOString() ?? null,
  };
}
