import { join } from "node:path";
import { runCommand, untilStopped } from "./lib/command.mjs";
import { waitForHealth } from "./lib/health.mjs";
import { openInstallation } from "./lib/installation.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { projectRoot } from "./lib/paths.mjs";
import { checkPort, parsePort } from "./lib/ports.mjs";
import { prepareDatabase } from "./lib/prepare.mjs";
import { startServices } from "./lib/services.mjs";
import { startedLines } from "./lib/started-lines.mjs";
import { supervise } from "./lib/supervise.mjs";

// npm run dev: the embedded parts of npm start, with Vite's server and processes that start anew when a file changes.
const say = (/** @type {string} */ line) => console.log(line);
const inModules = (/** @type {string} */ path) => join(projectRoot, "node_modules", path);

await runCommand(async (context) => {
  const installation = await openInstallation({ context, command: "npm run dev", say });
  const { settings, state, turn } = installation;
  const vitePort = parsePort(process.env.VITE_PORT, { name: "VITE_PORT", usual: 4311 });
  await checkPort(settings.port, "PORT", "npm run dev");
  await checkPort(vitePort, "VITE_PORT", "npm run dev");
  await ensurePackages({ say, stopping: context.stopping, withTools: true });
  await startServices(installation);
  const address = `http://127.0.0.1:${vitePort}`;
  const { env, hasDemo } = await prepareDatabase(installation, { mode: "development", publicUrl: address });

  const part = (/** @type {string} */ name, /** @type {string[]} */ args) =>
    supervise({ part: { name, args, env: { ...env, VITE_PORT: String(vitePort) }, cwd: projectRoot }, context, turn, say });
  const watched = (/** @type {string} */ script) => [inModules("tsx/dist/cli.mjs"), "watch", "--clear-screen=false", script];
  await Promise.all([
    part("web process", watched("server/main.ts")),
    part("worker", watched("server/worker.ts")),
    part("Vite server", [inModules("vite/bin/vite.js"), "--port", String(vitePort), "--strictPort"]),
  ]);
  await waitForHealth({ url: `http://127.0.0.1:${settings.port}`, log: "the output above", stopping: context.stopping });
  turn.setAddress(address);
  startedLines({ address, settings, state, hasDemo }).forEach(say);
  await untilStopped(context.stopping);
  say("Stopping …");
});
