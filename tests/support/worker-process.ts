import { spawn, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { fileURLToPath } from "node:url";
import type { Services } from "../../server/services";

const script = fileURLToPath(new URL("trial-worker.ts", import.meta.url));
const wholeWorker = fileURLToPath(new URL("../../server/worker.ts", import.meta.url));

/** Starts a worker in a process of its own on the same database; resolves when it takes jobs. */
export async function startWorkerProcess({ environment }: Services): Promise<ChildProcess> {
  const variables = Object.entries(environment).map(([name, value]) => [name, String(value)]);
  const child = spawn(process.execPath, ["--import", "tsx", script], {
    env: {
      PATH: process.env.PATH,
      AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true",
      ...Object.fromEntries(variables),
    },
    stdio: ["ignore", "pipe", "inherit"],
  });
  const ended = once(child, "exit").then(([code]) =>
    Promise.reject(new Error(`The worker ended at its start with ${code}.`)),
  );
  // Only a start that fails is of interest here.
  ended.catch(() => undefined);
  await Promise.race([once(child.stdout, "data"), ended]);
  return child;
}

/** Starts the application's own worker in a process of its own, on the same database. */
export function startWholeWorker({ environment }: Services): ChildProcess {
  const variables = Object.entries(environment).map(([name, value]) => [name, String(value)]);
  return spawn(process.execPath, ["--import", "tsx", wholeWorker], {
    env: { PATH: process.env.PATH, AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true", ...Object.fromEntries(variables), LOG_LEVEL: "silent" },
    stdio: ["ignore", "ignore", "inherit"],
  });
}

/** Sends a signal and waits for the process to end. */
export async function endProcess(child: ChildProcess, signal: NodeJS.Signals): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const exit = once(child, "exit");
  child.kill(signal);
  await exit;
}
