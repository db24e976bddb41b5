import { randomBytes } from "node:crypto";
import { chmodSync, mkdirSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { startPart } from "./part.mjs";
import { pickPort } from "./ports.mjs";
import { createCluster, databaseUrl, ensureDatabase, startCluster, stopCluster } from "./postgres/cluster.mjs";
import { postgresUserReaches, runsAsRoot } from "./postgres/postgres-user.mjs";
import { ensurePostgres } from "./postgres/programs.mjs";
import { Problem } from "./problem.mjs";
import { fileStorePart, mailPart } from "./services.mjs";

/**
 * Starts a database server, a file store and a mail catcher for tests alone, in a folder that goes when the command
 * ends. The database gives up safety for speed: nothing in it outlives the tests.
 * @param {{ context: import("./command.mjs").Context, say: (line: string) => void }} options
 * @returns {Promise<Record<string, string>>} the variables that tell tests where these are
 */
export async function startThrowAwayServices({ context, say }) {
  const { stopping } = context;
  const [programs] = await ensurePostgres({ say, stopping });
  const folder = makeFolder(context);
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

/** @param {import("./command.mjs").Context} context */
function makeFolder(context) {
  const base = [tmpdir(), "/tmp", "/var/tmp"].find((candidate) => !runsAsRoot() || postgresUserReaches(candidate));
  if (!base) throw new Problem("The user postgres reaches no folder for temporary files: set TMPDIR to one it can reach.");
  const folder = mkdtempSync(join(base, "shelftide-test-"));
  context.onClose(() => rmSync(folder, { recursive: true, force: true }));
  chmodSync(folder, 0o711);
  mkdirSync(join(folder, "logs"));
  return folder;
}

/** @param {number} count */
async function pickPorts(count) {
  /** @type {number[]} */
  const ports = [];
  while (ports.length < count) ports.push(await pickPort({ taken: ports }));
  return ports;
}
