import type { EntityManager } from "@mikro-orm/postgresql";
import { JobEntity, type JobRow } from "./jobs.entities";

export function findJob(em: EntityManager, id: string): Promise<JobRow | null> {
  return em.findOne(JobEntity, { id });
}
