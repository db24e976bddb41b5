import type { ChildProcess } from "node:child_process";
import { closeServices, createServices } from "../../../server/create-services";
import { jobDefinitions } from "../../../server/job-definitions";
import type { Services } from "../../../server/services";
import { endProcess, startWholeWorker } from "../worker-process";

/** A worker process for as long as something is done, after which it is gone, by force if need be. */
export async function whileWorking(services: Services, run: (worker: ChildProcess) => Promise<void>): Promise<void> {
  const worker = startWholeWorker(services);
  try {
    await run(worker);
  } finally {
    await endProcess(worker, "SIGKILL");
  }
}

/** A worker within this process that is quick to take over, and tries again at once. */
export async function withSuccessor({ environment, now }: Services, run: () => Promise<void>): Promise<void> {
  const services = await createServices(environment, { now, jobTiming: { silentAfterSeconds: 1, rescueEveryMs: 200, stopPatienceMs: 5_000 } });
  try {
    await services.queue.work(jobDefinitions.map((definition) => ({ ...definition, retryDelaysSeconds: [0] })), services);
    await run();
  } finally {
    await closeServices(services);
  }
}
