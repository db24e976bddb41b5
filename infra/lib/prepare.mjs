import { applicationEnvironment } from "./application-environment.mjs";
import { hashSources } from "./hash-sources.mjs";
import { projectRoot } from "./paths.mjs";
import { runScript } from "./script.mjs";
import { planDemo } from "./settings.mjs";
import { writeState } from "./state.mjs";

/**
 * Brings a started installation's database to the present: migrations, then the demo where it belongs.
 * @param {import("./services.mjs").Installation} installation
 * @param {{ mode?: string, publicUrl?: string }} [options]
 * @returns {Promise<{ env: NodeJS.ProcessEnv, hasDemo: boolean }>} the environment of the application's processes
 */
export async function prepareDatabase(installation, { mode, publicUrl } = {}) {
  const { settings, state, folder, context, say } = installation;
  const demo = planDemo({ ...settings, remembered: state.demo });
  const hasDemo = demo !== "none";
  const env = applicationEnvironment({ settings, state, hasDemo, mode, publicUrl });
  await migrate(installation, env);
  if (demo === "load") {
    say("Loading the demo chain (up to a minute) …");
    await runScript({
      script: "demo/load.ts", env, stopping: context.stopping, failure: "The demo chain could not be loaded",
    });
  }
  if (settings.embedsDatabase && state.demo === null) {
    state.demo = hasDemo ? "loaded" : "empty";
    writeState(folder, state);
  }
  return { env, hasDemo };
}

/**
 * Runs the migrations, unless the embedded database is known to have run exactly these.
 * @param {Pick<import("./services.mjs").Installation, "settings" | "state" | "folder" | "context">} installation
 * @param {NodeJS.ProcessEnv} env
 */
export async function migrate({ settings, state, folder, context }, env) {
  const schema = hashSources(projectRoot, ["server/migrations", "server/database"]);
  if (settings.embedsDatabase && state.schema === schema) return;
  await runScript({
    script: "server/database/migrate.ts", env, stopping: context.stopping,
    failure: "The database could not be brought up to date",
  });
  if (!settings.embedsDatabase) return;
  state.schema = schema;
  writeState(folder, state);
}
