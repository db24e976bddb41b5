import { join } from "node:path";
import { ensureChromium } from "./lib/chromium.mjs";
import { ensureClientBuild } from "./lib/client-build.mjs";
import { runCommand } from "./lib/command.mjs";
import { once } from "./lib/once.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { projectRoot } from "./lib/paths.mjs";
import { Problem } from "./lib/problem.mjs";
import { runCheck, runStages, runVitest } from "./lib/stages.mjs";
import { startThrowAwayServices } from "./lib/throw-away.mjs";

// npm test: everything a change must pass. npm test -- NAME [arguments for vitest] runs one stage.
const say = (/** @type {string} */ line) => console.log(line);
const inModules = (/** @type {string} */ path) => join(projectRoot, "node_modules", path);

await runCommand(async (context) => {
  const { stopping } = context;
  const services = once(() => startThrowAwayServices({ context, say }));
  const vitest = (/** @type {string} */ project, /** @type {string[]} */ args, /** @type {Record<string, string>} */ env = {}) =>
    runVitest({ project, args, env, stopping });

  /** @type {import("./lib/stages.mjs").Stage[]} */
  const stages = [
    { name: "types", title: "Types", run: (args) => runCheck({ args: [inModules("typescript/bin/tsc"), "--noEmit", ...args], stopping }) },
    { name: "lint", title: "Lint", run: (args) => runCheck({ args: [inModules("eslint/bin/eslint.js"), ...(args.length ? args : ["."]), "--max-warnings", "0"], stopping }) },
    { name: "unit", title: "Unit tests", run: (args) => vitest("unit", args) },
    { name: "client", title: "Client tests", run: (args) => vitest("client", args) },
    { name: "api", title: "API tests, on a PostgreSQL of their own", run: async (args) => vitest("api", args, await services()) },
    {
      name: "browser",
      title: "Browser tests, on the built application in Chromium",
      run: async (args) => {
        const chromium = await ensureChromium({ say, stopping });
        await ensureClientBuild({ say, stopping });
        return vitest("browser", args, { ...(await services()), CHROMIUM_PATH: chromium });
      },
    },
  ];

  const [name, ...args] = process.argv.slice(2);
  const chosen = name === undefined ? stages : stages.filter((stage) => stage.name === name);
  if (chosen.length === 0) {
    throw new Problem(`There is no stage "${name}": npm test, or npm test -- with one of ${stages.map((stage) => stage.name).join(", ")}.`);
  }
  await ensurePackages({ say, stopping, withTools: true });
  return runStages({ stages: chosen, args, say });
});
