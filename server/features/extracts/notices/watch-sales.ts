import type { Services } from "../../../services";
import { missingSalesJob } from "./missing-sales.jobs";
import { mustTellOfMissing } from "./missing-sales.service";

/** Sales are due at a full hour; so much later at most they are found missing. */
const everyMs = 10 * 60_000;

/** Looks now and again, for as long as the process runs, whether sales that are due are missing, and has it told if so. */
export function watchSales(services: Services): void {
  const look = () => lookForMissing(services).catch((error: unknown) => services.logger.error({ err: error }, "missing sales could not be looked for"));
  void look();
  const timer = setInterval(() => void look(), everyMs);
  services.stopping.signal.addEventListener("abort", () => clearInterval(timer), { once: true });
}

/** Puts a job into the queue where data admins are yet to be told; however many processes look, there is one at a time. */
export async function lookForMissing(services: Services): Promise<boolean> {
  return services.orm.em.fork().transactional(async (em) => {
    if (!(await mustTellOfMissing(em, services.now()))) return false;
    await services.queue.enqueue(em, missingSalesJob, {}, { singletonKey: "missing-sales" });
    return true;
  });
}
