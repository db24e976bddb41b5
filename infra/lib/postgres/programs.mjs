import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { installFromDebian } from "../debian.mjs";
import { Problem } from "../problem.mjs";

const debianFolder = "/usr/lib/postgresql";
const clusterSettings = "/etc/postgresql-common/createcluster.conf";

/**
 * The folders that hold PostgreSQL's server programs, newest version first. POSTGRES_BIN names the one to use
 * instead of Debian's.
 * @param {NodeJS.ProcessEnv} [env]
 * @returns {string[]}
 */
export function postgresFolders(env = process.env) {
  const named = env.POSTGRES_BIN;
  const folders = named ? [named] : debianVersions().map((version) => join(debianFolder, version, "bin"));
  return folders.filter((folder) => existsSync(join(folder, "initdb")) && existsSync(join(folder, "pg_ctl")));
}

function debianVersions() {
  if (!existsSync(debianFolder)) return [];
  return readdirSync(debianFolder).filter((name) => /^\d+$/.test(name)).sort((a, b) => Number(b) - Number(a));
}

/**
 * Finds PostgreSQL's programs; installs Debian's when there are none and this is root.
 * @param {{ say: (line: string) => void, stopping: AbortSignal, env?: NodeJS.ProcessEnv }} options
 * @returns {Promise<string[]>} folders, newest version first; at least one
 */
export async function ensurePostgres({ say, stopping, env = process.env }) {
  const present = postgresFolders(env);
  if (present.length > 0) return present;
  if (env.POSTGRES_BIN) {
    throw new Problem(
      `POSTGRES_BIN=${env.POSTGRES_BIN} holds no PostgreSQL (initdb, pg_ctl): ` +
        "give the folder that does, or unset it, then try again.",
    );
  }
  await installFromDebian({
    what: "PostgreSQL", packages: ["postgresql"], otherwise: "set DATABASE_URL to one you have",
    say, stopping, prepare: askForNoCluster,
  });
  const installed = postgresFolders();
  if (installed.length > 0) return installed;
  throw new Problem(`PostgreSQL was installed but is not under ${debianFolder}: set POSTGRES_BIN to its programs' folder.`);
}

/** Debian's package would make and start a database of its own on port 5432, which nobody asked for. */
function askForNoCluster() {
  const before = existsSync(clusterSettings) ? readFileSync(clusterSettings, "utf8") : "";
  if (/^\s*create_main_cluster\s*=/m.test(before)) return;
  mkdirSync(dirname(clusterSettings), { recursive: true });
  writeFileSync(clusterSettings, `${before}\n# No database on port 5432 merely because a program needs PostgreSQL.\ncreate_main_cluster = false\n`);
}

/**
 * The programs that fit a database that exists already.
 * @param {string[]} folders
 * @param {string} dataFolder the database's own folder
 * @returns {string}
 */
export function programsFor(folders, dataFolder) {
  const versionFile = join(dataFolder, "PG_VERSION");
  if (!existsSync(versionFile)) return folders[0];
  const version = readFileSync(versionFile, "utf8").trim();
  const fitting = folders.find((folder) => folder.includes(`/${version}/`));
  if (fitting) return fitting;
  if (process.env.POSTGRES_BIN) return folders[0];
  throw new Problem(
    `The database in ${dataFolder} was made by PostgreSQL ${version}, which is no longer installed: ` +
      `install postgresql-${version}, then start again.`,
  );
}
