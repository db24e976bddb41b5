import { readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { commandLine, identify } from "../process-identity.mjs";

/**
 * The server that PostgreSQL's own lock file names.
 * @param {string} dataFolder
 * @returns {{ pid: number, port: number } | null}
 */
export function readPostmaster(dataFolder) {
  try {
    return parsePostmaster(readFileSync(join(dataFolder, "postmaster.pid"), "utf8"));
  } catch {
    return null;
  }
}

/**
 * @param {string} text of postmaster.pid: process, data folder, start time, port, ... one a line
 * @returns {{ pid: number, port: number } | null}
 */
export function parsePostmaster(text) {
  const lines = text.split("\n");
  const pid = Number(lines[0]);
  return Number.isInteger(pid) && pid > 0 ? { pid, port: Number(lines[3]) || 0 } : null;
}

/**
 * Whether a server runs on this data folder. A process that only happens to have the number of one that was ended
 * by force is told apart by its command line.
 * @param {string} dataFolder
 * @param {(pid: number) => string} [lineOf]
 */
export function isPostmasterAlive(dataFolder, lineOf = commandLine) {
  const found = readPostmaster(dataFolder);
  if (!found) return false;
  const line = lineOf(found.pid);
  return /\bpostgres\b/.test(line) && line.includes(dataFolder);
}

/**
 * Removes a lock file that names no server of ours: PostgreSQL itself refuses to start when another process of the
 * same user has since got that number.
 * @param {string} dataFolder
 * @returns {boolean} whether one was removed
 */
export function clearStaleLock(dataFolder) {
  if (isPostmasterAlive(dataFolder)) return false;
  const found = readPostmaster(dataFolder);
  // A lock without a living process is PostgreSQL's own business, and it checks for left-over backends first.
  if (!found || !identify(found.pid)) return false;
  rmSync(join(dataFolder, "postmaster.pid"), { force: true });
  return true;
}
