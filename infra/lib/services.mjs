import { join } from "node:path";
import { standInStore } from "./application-environment.mjs";
import { projectRoot } from "./paths.mjs";
import { pickPort } from "./ports.mjs";
import { createCluster, ensureDatabase, startCluster, stopCluster } from "./postgres/cluster.mjs";
import { keepClusterUp } from "./postgres/keep-up.mjs";
import { ensurePostgres, programsFor } from "./postgres/programs.mjs";
import { writeState } from "./state.mjs";
import { supervise } from "./supervise.mjs";

/**
 * What every step of starting an installation needs.
 * @typedef {object} Installation
 * @property {import("./command.mjs").Context} context
 * @property {import("./turn.mjs").TurnHandle} turn
 * @property {import("./settings.mjs").Settings} settings
 * @property {import("./state.mjs").State} state
 * @property {string} folder the data folder
 * @property {(line: string) => void} say
 */

/**
 * Starts the embedded parts that no real service replaces, and sees to it that they stop with the command.
 * @param {Installation} installation
 * @param {{ databaseOnly?: boolean }} [options]
 */
export async function startServices(installation, { databaseOnly = false } = {}) {
  const { settings } = installation;
  const embedsFiles = settings.embedsFiles && !databaseOnly;
  const embedsMail = settings.embedsMail && !databaseOnly;
  const cluster = settings.embedsDatabase ? await prepareCluster(installation) : null;
  await assignPorts(installation, { embedsDatabase: cluster !== null, embedsFiles, embedsMail });
  const starts = [];
  if (cluster) starts.push(runDatabase(installation, cluster));
  if (embedsFiles) starts.push(runFileStore(installation));
  if (embedsMail) starts.push(runMail(installation));
  await Promise.all(starts);
}

/** @param {Installation} installation */
async function prepareCluster({ context, state, folder, say }) {
  const { stopping } = context;
  const folders = await ensurePostgres({ say, stopping });
  const home = join(folder, "postgres");
  const cluster = { home, programs: programsFor(folders, join(home, "data")), port: 0, password: state.databasePassword };
  // One left behind would hold the remembered port.
  await stopCluster(cluster);
  return cluster;
}

/**
 * @param {Installation} installation
 * @param {{ embedsDatabase: boolean, embedsFiles: boolean, embedsMail: boolean }} parts
 */
async function assignPorts({ state, folder, settings }, { embedsDatabase, embedsFiles, embedsMail }) {
  /** @type {(keyof import("./state.mjs").State["ports"])[]} */
  const names = [];
  if (embedsDatabase) names.push("database");
  if (embedsFiles) names.push("files");
  if (embedsMail) names.push("smtp", "mailPage");
  const taken = [settings.port];
  for (const name of names) {
    const port = await pickPort({ remembered: state.ports[name], taken });
    state.ports[name] = port;
    taken.push(port);
  }
  writeState(folder, state);
}

/**
 * @param {Installation} installation
 * @param {import("./postgres/cluster.mjs").Cluster} cluster
 */
async function runDatabase(installation, cluster) {
  const { context, state, say } = installation;
  cluster.port = state.ports.database ?? 0;
  context.onClose(() => stopCluster(cluster));
  await createCluster(cluster, context.stopping);
  await startCluster(cluster, { stopping: context.stopping, say });
  if (await ensureDatabase(cluster, context.stopping)) state.schema = null;
  keepClusterUp({ cluster, context, say });
}

/** @param {Installation} installation */
function runFileStore({ context, turn, state, folder, say }) {
  return supervise({ part: fileStorePart({ folder, port: state.ports.files ?? 0 }), context, turn, say });
}

/**
 * The file store's stand-in.
 * @param {{ folder: string, port: number }} options
 * @returns {import("./part.mjs").Part}
 */
export function fileStorePart({ folder, port }) {
  return {
    name: "file store",
    args: [join(projectRoot, "infra/fakes/file-store.mjs"), String(port), join(folder, "files"), standInStore.bucket],
    // Its paged listing uses a hash that newer OpenSSL switches off.
    env: { ...process.env, NODE_OPTIONS: "--openssl-legacy-provider" },
    log: join(folder, "logs", "files.log"),
    announces: true,
  };
}

/** @param {Installation} installation */
function runMail({ context, turn, state, folder, say }) {
  const { smtp = 0, mailPage = 0 } = state.ports;
  return supervise({ part: mailPart({ folder, smtpPort: smtp, pagePort: mailPage }), context, turn, say });
}

/**
 * The mail stand-in: takes mail over SMTP and shows it on a page.
 * @param {{ folder: string, smtpPort: number, pagePort: number }} options
 * @returns {import("./part.mjs").Part}
 */
export function mailPart({ folder, smtpPort, pagePort }) {
  const script = join(projectRoot, "infra/fakes/mail.mjs");
  return {
    name: "mail catcher",
    args: [script, String(smtpPort), String(pagePort), join(folder, "mail")],
    env: process.env,
    log: join(folder, "logs", "mail.log"),
    announces: true,
  };
}
