import { applicationEnvironment } from "./lib/application-environment.mjs";
import { runCommand } from "./lib/command.mjs";
import { useDatabase } from "./lib/use-database.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { migrate } from "./lib/prepare.mjs";
import { Problem } from "./lib/problem.mjs";
import { runScript } from "./lib/script.mjs";

// npm run create-administrator -- EMAIL [--roles ROLE,ROLE]: prints a one-time password, whether or not the application
// runs. The script that makes the person reads the roles.
const say = (/** @type {string} */ line) => console.error(line);

await runCommand(async (context) => {
  const args = process.argv.slice(2);
  const [email] = args;
  if (!email || !/^\S+@\S+$/.test(email)) {
    throw new Problem("Give one e-mail address first: npm run create-administrator -- EMAIL [--roles ROLE,ROLE]");
  }
  const { stopping } = context;
  await ensurePackages({ say, stopping });
  const database = await useDatabase({ context, command: "npm run create-administrator", say });
  const { settings, state } = database;
  const env = applicationEnvironment({ settings, state, hasDemo: state.demo === "loaded" && settings.embedsDatabase });
  await migrate(database, env);
  await runScript({
    script: "server/features/accounts/create-administrator.ts", args, env, stopping, show: true,
    failure: `No administrator was made for ${email}`,
  });
});
