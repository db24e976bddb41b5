import { randomBytes } from "node:crypto";
import { chmodSync, mkdirSync, mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { startPart } from "./part.mjs";
import { pickPort } from "./ports.mjs";
import { createCluster, databaseUrl, ensureDatabase, startCluster, stopCluster } from "./postgres/cluster.mjs";
import { postgresUserReaches, runsAsRoot } from "./postgres/postgres-user.mjs";
import { ensurePostgres } from "./postgres/programs.mjs";
import { Problem } from "./problem.mjs";
import { recordPrograms } from "./run-program.mjs";
import { fileStorePart, mailPart } from "./services.mjs";
import { clearLeftovers, isLeftBehind, takeTurn } from "./turn.mjs";

const prefix = "shelftide-test-";

/**
 * Starts a database server, a file store and a mail catcher for tests alone, in a folder that goes when the command
 * ends. The database gives up safety for speed: nothing in it outlives the tests.
 * @param {{ context: import("./command.mjs").Context, say: (line: string) => void }} options
 * @returns {Promise<Record<string, string>>} the variables that tell tests where these are
 */
export async function startThrowAwayServices({ context, say }) {
  const { stopping } = context;
  const [programs] = await ensurePostgres({ say, stopping });
  const base = findBase();
  await clearLeftBehind({ base, programs, say });
  const folder = makeFolder(base, context);
  const turn = await takeTurn({ folder, command: "npm test", say });
  recordPrograms(turn);
  const ports = await pickPorts(4);
  const [database, files, smtp, page] = ports;
  const cluster = {
    home: join(folder, "postgres"), programs, port: database, password: randomBytes(16).toString("hex"), durable: false,
  };
  context.onClose(() => stopCluster(cluster));
  await createCluster(cluster, stopping);
  await startCluster(cluster, { stopping, say });
  await ensureDatabase(cluster, stopping, { mayCreateDatabases: true });
  const parts = [fileStorePart({ folder, port: files }), mailPart({ folder, smtpPort: smtp, pagePort: page })];
  await Promise.all(parts.map((part) => {
    const running = startPart(part);
    turn.addChild(part.name, running.pid);
    context.onClose(running.stop);
    return running.ready;
  }));
  return {
    TEST_DATABASE_URL: databaseUrl(cluster, "postgres"),
    TEST_S3_ENDPOINT: `http://127.0.0.1:${files}`,
    TEST_SMTP_URL: `smtp://127.0.0.1:${smtp}`,
    TEST_MAIL_URL: `http://127.0.0.1:${page}`,
    // The S3 client otherwise prints a notice about Node.js versions in every test process.
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true",
  };
}

function findBase() {
  const base = [tmpdir(), "/tmp", "/var/tmp"].find((folder) => !runsAsRoot() || postgresUserReaches(folder));
  if (base) return base;
  throw new Problem("The user postgres reaches no folder for temporary files: set TMPDIR to one it can reach.");
}

/**
 * @param {string} base
 * @param {import("./command.mjs").Context} context
 */
function makeFolder(base, context) {
  const folder = mkdtempSync(join(base, prefix));
  context.onClose(() => rmSync(folder, { recursive: true, force: true }));
  chmodSync(folder, 0o711);
  mkdirSync(join(folder, "logs"));
  return folder;
}

/**
 * Removes what test runs left that were ended by force: a database server would otherwise run on for ever.
 * @param {{ base: string, programs: string, say: (line: string) => void }} options
 */
async function clearLeftBehind({ base, programs, say }) {
  const folders = readdirSync(base).filter((name) => name.startsWith(prefix)).map((name) => join(base, name));
  for (const folder of folders.filter(isLeftBehind)) {
    say(`Removing ${folder}, which a test run left that was ended by force.`);
    await clearLeftovers(folder, say);
    await stopCluster({ home: join(folder, "postgres"), programs, port: 0, password: "" });
    rmSync(folder, { recursive: true, force: true });
  }
}

/** @param {number} count */
async function pickPorts(count) {
  /** @type {number[]} */
  const ports = [];
  while (ports.length < count) ports.push(await pickPort({ taken: ports }));
  return ports;
}
