import type { EntityManager } from "@mikro-orm/postgresql";
import { ProblemError, conflict, notFound } from "../../errors";
import type { Caller } from "../../http/route";
import { audit } from "../accounts";
import type { JobRow } from "./jobs.entities";
import { mayCancel } from "./jobs.policy";
import { findJob, requestCancel } from "./jobs.repository";

/** How a job stands. @throws ProblemError 404 where there is none with this id. */
export async function getJob(em: EntityManager, id: string): Promise<JobRow> {
  const job = await findJob(em, id);
  if (!job) throw notFound("job");
  return job;
}

/**
 * Ends a waiting job at once, and asks a running one to stop at its next step.
 *
 * @throws ProblemError 403 for someone else's job, 409 for one that has ended otherwise.
 */
export async function cancelJob(
  em: EntityManager,
  id: string,
  { caller, requestId }: { caller: Caller; requestId: string },
): Promise<JobRow> {
  const job = await getJob(em, id);
  if (!mayCancel(caller, job)) {
    throw new ProblemError({
      status: 403,
      code: "not-your-job",
      detail: "Only the person who asked for this job, or an administrator, can stop it.",
    });
  }
  if (job.state === "cancelled") return job;
  await em.transactional(async (inner) => {
    const stopped = await requestCancel(inner, id, { code: "cancelled", detail: "Cancelled on request." });
    if (!stopped) throw conflict("job-ended", "This job has ended already, so there is nothing to stop.");
    const subject = { kind: "job", id };
    audit(inner, {
      personId: caller.personId,
      tokenId: caller.tokenId,
      action: "job.cancelled",
      subject,
      detail: { kind: job.kind },
      requestId,
    });
  });
  return em.refreshOrFail(job);
}
