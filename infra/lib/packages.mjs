import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { projectRoot } from "./paths.mjs";
import { lastWords, mustRun } from "./run-program.mjs";

/**
 * @typedef {{ version?: string, integrity?: string, optional?: boolean, dev?: boolean, devOptional?: boolean }} LockEntry
 * @typedef {{ packages?: Record<string, LockEntry> }} Lock
 */

/**
 * Installs the Node packages when they are missing or not those of package-lock.json.
 * @param {{ say: (line: string) => void, stopping: AbortSignal, withTools?: boolean, root?: string }} options
 *   `withTools`: the developers' packages must be there too
 */
export async function ensurePackages({ say, stopping, withTools = false, root = projectRoot }) {
  const wanted = readLock(join(root, "package-lock.json"));
  const installed = readLock(join(root, "node_modules", ".package-lock.json"));
  if (wanted && installed && packagesFit({ wanted, installed, withTools })) return;
  say("Installing the Node packages (about a minute) …");
  const npm = npmCommand();
  await mustRun({
    program: npm.program,
    args: [...npm.args, "ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"],
    cwd: root,
    stopping,
    failure: (output) => `npm could not install the packages (${npmReason(output)}): check the network, then try again.`,
  });
}

/**
 * Whether what is installed is what the lock file names. Packages for other systems may be missing.
 * @param {{ wanted: Lock, installed: Lock, withTools: boolean }} options
 */
export function packagesFit({ wanted, installed, withTools }) {
  const there = installed.packages ?? {};
  return Object.entries(wanted.packages ?? {}).every(([path, entry]) => {
    if (path === "") return true;
    const found = there[path];
    if (found) return found.version === entry.version && found.integrity === entry.integrity;
    return Boolean(entry.optional || entry.devOptional || (entry.dev && !withTools));
  });
}

/**
 * npm's own record in node_modules is written last, so an installation that was cut short has none.
 * @param {string} path
 * @returns {Lock | null}
 */
function readLock(path) {
  if (!existsSync(path)) return null;
  try {
    return JSON.parse(readFileSync(path, "utf8"));
  } catch {
    return null;
  }
}

/** The npm that runs this command, else the one on the PATH. */
function npmCommand() {
  const script = process.env.npm_execpath;
  return script?.endsWith(".js") ? { program: process.execPath, args: [script] } : { program: "npm", args: [] };
}

/** @param {string} output */
function npmReason(output) {
  const lines = output.split("\n").filter((line) => /^npm (error|ERR!)/.test(line) && !/A complete log|code /.test(line));
  return lastWords((lines[0] ?? output).replace(/^npm (error|ERR!)\s*/, ""));
}
