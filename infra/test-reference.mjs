import { runCommand } from "./lib/command.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { ensureR } from "./lib/r-packages.mjs";
import { runStages, runVitest } from "./lib/stages.mjs";
import { startThrowAwayServices } from "./lib/throw-away.mjs";

// npm run test:reference: the engine against R, and the whole path from an extract to a model on real sales.
const say = (/** @type {string} */ line) => console.log(line);

await runCommand(async (context) => {
  const { stopping } = context;
  await ensurePackages({ say, stopping, withTools: true });
  const reference = {
    name: "reference",
    title: "Reference tests, against R",
    run: async (/** @type {string[]} */ args) => {
      await ensureR({ say, stopping });
      return runVitest({ project: "reference", args, env: await startThrowAwayServices({ context, say }), stopping });
    },
  };
  return runStages({ stages: [reference], args: process.argv.slice(2), say });
});
