import { spawn, type ChildProcess } from "node:child_process";
import { fileURLToPath } from "node:url";
import { closeServices, createServices } from "../../../server/create-services";
import type { Environment } from "../../../server/environment";
import { jobDefinitions } from "../../../server/job-definitions";
import { endProcess } from "../worker-process";

const script = fileURLToPath(new URL("../../../server/worker.ts", import.meta.url));

/** Starts the real worker in a process of its own. */
export function startRealWorker(environment: Environment): ChildProcess {
  const variables = Object.entries(environment).map(([name, value]) => [name, String(value)]);
  return spawn(process.execPath, ["--import", "tsx", script], {
    env: { PATH: process.env.PATH, AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true", ...Object.fromEntries(variables) },
    stdio: ["ignore", "ignore", "inherit"],
  });
}

/** The same for as long as something is done, after which it is gone, by force if need be. */
export async function whileWorking(environment: Environment, run: (worker: ChildProcess) => Promise<void>): Promise<void> {
  const worker = startRealWorker(environment);
  try {
    await run(worker);
  } finally {
    await endProcess(worker, "SIGKILL");
  }
}

type Options = { now: () => Date; run: () => Promise<void> };

/** A worker within this process that is quick to take over, and tries again at once. */
export async function withSuccessor(environment: Environment, { now, run }: Options): Promise<void> {
  const services = await createServices(environment, { now, jobTiming: { silentAfterSeconds: 1, rescueEveryMs: 200, stopPatienceMs: 5_000 } });
  try {
    await services.queue.work(jobDefinitions.map((definition) => ({ ...definition, retryDelaysSeconds: [0] })), services);
    await run();
  } finally {
    await closeServices(services);
  }
}
