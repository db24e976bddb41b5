import { startApplication } from "./lib/application.mjs";
import { ensureClientBuild } from "./lib/client-build.mjs";
import { runCommand, untilStopped } from "./lib/command.mjs";
import { openInstallation } from "./lib/installation.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { checkPort } from "./lib/ports.mjs";
import { ensurePostgres } from "./lib/postgres/programs.mjs";
import { prepareDatabase } from "./lib/prepare.mjs";
import { startServices } from "./lib/services.mjs";
import { startedLines } from "./lib/started-lines.mjs";

// npm start: everything a person needs to use the product on this machine, until Ctrl-C or SIGTERM.
const say = (/** @type {string} */ line) => console.log(line);

await runCommand(async (context) => {
  const installation = await openInstallation({ context, command: "npm start", say });
  const { settings, state, turn } = installation;
  await checkPort(settings.port, "PORT", "npm start");
  const { stopping } = context;
  await Promise.all([
    ensurePackages({ say, stopping }),
    settings.embedsDatabase && ensurePostgres({ say, stopping }),
  ]);
  say("Starting …");
  context.onClose(() => say("Everything is stopped; the data is kept."));
  await startServices(installation);
  const [{ env, hasDemo }] = await Promise.all([
    prepareDatabase(installation),
    ensureClientBuild({ say, stopping }),
  ]);
  await startApplication(installation, env);
  const address = `http://127.0.0.1:${settings.port}`;
  turn.setAddress(address);
  startedLines({ address, settings, state, hasDemo }).forEach(say);
  await untilStopped(stopping);
  say("Stopping …");
});
