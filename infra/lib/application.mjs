import { join } from "node:path";
import { waitForHealth } from "./health.mjs";
import { projectRoot } from "./paths.mjs";
import { typeScript } from "./script.mjs";
import { supervise } from "./supervise.mjs";

const leaveWithParent = ["--import", join(projectRoot, "infra/lib/leave-with-parent.mjs")];

/**
 * Starts one web process, waits until it answers, then starts one worker: on a small machine the two would only slow
 * each other down.
 * @param {import("./services.mjs").Installation} installation
 * @param {NodeJS.ProcessEnv} env
 */
export async function startApplication({ context, turn, settings, folder, say }, env) {
  const part = (/** @type {string} */ name, /** @type {string} */ script, /** @type {string} */ log) => ({
    name, args: [...typeScript, ...leaveWithParent, script], env, cwd: projectRoot, log: join(folder, "logs", log),
  });
  const web = part("web process", "server/main.ts", "web.log");
  const worker = part("worker", "server/worker.ts", "worker.log");
  const url = `http://127.0.0.1:${settings.port}`;
  const untilUsable = () => waitForHealth({ url, log: web.log, stopping: context.stopping });
  await supervise({ part: web, context, turn, say, untilUsable });
  await supervise({ part: worker, context, turn, say });
}
