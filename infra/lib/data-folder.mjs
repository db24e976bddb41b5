import { createHash } from "node:crypto";
import { existsSync, mkdirSync, statfsSync } from "node:fs";
import { join } from "node:path";
import { projectRoot } from "./paths.mjs";
import { postgresUserReaches, runsAsRoot } from "./postgres/postgres-user.mjs";
import { Problem } from "./problem.mjs";

const leastFreeMegabytes = { first: 1_024, later: 100 };

/**
 * Finds, and makes where needed, the folder that holds everything an installation keeps: state, database, files,
 * caught mail and logs. It is `.data` in the checkout (or SHELFTIDE_DATA), except as root where the user postgres
 * cannot reach that: then a folder of this checkout's own under /var/lib/shelftide.
 * @param {{ embedsDatabase: boolean, say: (line: string) => void }} options
 * @returns {string} its full path
 */
export function openDataFolder({ embedsDatabase, say }) {
  const folder = chooseDataFolder({ embedsDatabase, say });
  const isNew = !existsSync(join(folder, "state.json"));
  // Open to pass through, because PostgreSQL's own user must reach its part; what is private in it is closed itself.
  mkdirSync(folder, { recursive: true, mode: 0o711 });
  mkdirSync(join(folder, "logs"), { recursive: true, mode: 0o700 });
  checkSpace(folder, isNew ? leastFreeMegabytes.first : leastFreeMegabytes.later);
  return folder;
}

/** @param {{ embedsDatabase: boolean, say: (line: string) => void }} options */
function chooseDataFolder({ embedsDatabase, say }) {
  if (process.env.SHELFTIDE_DATA) return process.env.SHELFTIDE_DATA;
  const usual = join(projectRoot, ".data");
  if (!embedsDatabase || !runsAsRoot() || postgresUserReaches(projectRoot)) return usual;
  const elsewhere = join("/var/lib/shelftide", folderNameFor(projectRoot));
  say(`Data is kept in ${elsewhere}, because the user postgres cannot reach ${projectRoot}.`);
  return elsewhere;
}

/**
 * @param {string} checkout a checkout's full path
 * @returns {string} a short name that no other checkout shares
 */
export function folderNameFor(checkout) {
  return createHash("sha256").update(checkout).digest("hex").slice(0, 16);
}

/**
 * @param {string} folder
 * @param {number} leastMegabytes
 */
function checkSpace(folder, leastMegabytes) {
  const { bavail, bsize } = statfsSync(folder);
  const freeMegabytes = Math.floor((bavail * bsize) / 2 ** 20);
  if (freeMegabytes >= leastMegabytes) return;
  throw new Problem(
    `Only ${freeMegabytes} MB are free on the disk that holds ${folder} and ${leastMegabytes} MB are needed: ` +
      "free some space, then start again.",
  );
}
