import type { EntityManager } from "@mikro-orm/postgresql";
import type { Services } from "../../../services";
import { quietly, type Progress } from "../check/progress";
import { lockCoverage, recount, takePending } from "./coverage.repository";

/**
 * Counts in every extract that was loaded or withdrawn and is yet to be counted, each in a transaction of its own, one at a
 * time in the whole installation. Counting is anew each time, so doing it again changes nothing.
 *
 * @returns how many extracts were counted in.
 */
export async function refreshCoverage(services: Services, { progress = quietly }: { progress?: Progress } = {}): Promise<number> {
  for (let counted = 0; ; counted++) {
    await progress({ done: counted, message: "Counting what is loaded of each store and week" });
    if (!(await services.orm.em.fork().transactional(countNext))) return counted;
  }
}

async function countNext(em: EntityManager): Promise<boolean> {
  await lockCoverage(em);
  const extract = await takePending(em);
  if (!extract) return false;
  const { id, isWithdrawn, firstWeek: first, lastWeek: last } = extract;
  if (first !== null && last !== null) await recount(em, { range: { first, last }, withdrawn: isWithdrawn ? id : null });
  return true;
}
