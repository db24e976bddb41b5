import type { EntityManager } from "@mikro-orm/postgresql";
import { notFound } from "../../errors";
import type { JobRow } from "./jobs.entities";
import { findJob } from "./jobs.repository";

/** How a job stands. @throws ProblemError 404 where there is none with this id. */
export async function getJob(em: EntityManager, id: string): Promise<JobRow> {
  const job = await findJob(em, id);
  if (!job) throw notFound("job");
  return job;
}
