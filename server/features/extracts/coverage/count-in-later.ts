import type { EntityManager } from "@mikro-orm/postgresql";
import type { Services } from "../../../services";
import type { Extract } from "../extracts.entities";
import { refreshCoverageJob } from "./coverage.jobs";
import { hasPending } from "./coverage.repository";

/** Has an extract counted in once the context's transaction, in which it is loaded or withdrawn, has come to its end. */
export async function countInLater(em: EntityManager, { services, extract }: { services: Services; extract: Extract }): Promise<void> {
  if (extract.kind !== "sales") return;
  extract.coveragePending = true;
  await services.queue.enqueue(em, refreshCoverageJob, {});
}

/** Puts the counting into the queue where something is yet to be counted in: for the start of a worker. */
export async function resumeCoverage(services: Services): Promise<void> {
  await services.orm.em.fork().transactional(async (em) => {
    if (await hasPending(em)) await services.queue.enqueue(em, refreshCoverageJob, {}, { singletonKey: "resume-coverage" });
  });
}
