import { applicationEnvironment } from "./lib/application-environment.mjs";
import { runCommand } from "./lib/command.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { migrate } from "./lib/prepare.mjs";
import { Problem } from "./lib/problem.mjs";
import { runScript } from "./lib/script.mjs";
import { useDatabase } from "./lib/use-database.mjs";

// npm run migration:create -- NAME: writes the difference between the entities and the committed snapshot as a new
// migration, and the new snapshot beside it.
const say = (/** @type {string} */ line) => console.log(line);

await runCommand(async (context) => {
  const [name, ...more] = process.argv.slice(2);
  if (more.length > 0 || (name && !/^[a-z][a-z0-9-]*$/.test(name))) {
    throw new Problem("Give one name in small letters and hyphens: npm run migration:create -- add-regions");
  }
  const { stopping } = context;
  await ensurePackages({ say, stopping, withTools: true });
  const database = await useDatabase({ context, command: "npm run migration:create", say });
  const { settings, state } = database;
  const env = applicationEnvironment({ settings, state, hasDemo: false });
  await migrate(database, env);
  // tsx loads the TypeScript; MikroORM would look for another loader and warn that it is not there.
  env.MIKRO_ORM_CLI_USE_TS_NODE = "0";
  // The name becomes part of the class's name.
  const naming = name ? ["--name", name.replaceAll("-", "_")] : [];
  await runScript({
    script: "node_modules/@mikro-orm/cli/cli.js", args: ["migration:create", ...naming], env, stopping, show: true,
    failure: "No migration was made",
  });
  say("Read the new file in server/migrations, and commit it together with the snapshot.");
});
