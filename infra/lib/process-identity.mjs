import { execFileSync } from "node:child_process";
import { existsSync, readFileSync } from "node:fs";

/**
 * A process that can be told from a later one with the same number.
 * @typedef {object} ProcessIdentity
 * @property {number} pid
 * @property {string} startedAt when it started, in the system's own words
 */

/**
 * @param {number} pid
 * @returns {ProcessIdentity | null} null when no such process lives
 */
export function identify(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return null;
  const startedAt = existsSync("/proc/self/stat") ? startFromProc(pid) : startFromPs(pid);
  return startedAt === null ? null : { pid, startedAt };
}

/**
 * Whether exactly this process still lives: the number alone may since have gone to another one.
 * @param {ProcessIdentity | null | undefined} identity
 */
export function isAlive(identity) {
  return identity ? identify(identity.pid)?.startedAt === identity.startedAt : false;
}

/**
 * @param {number} pid
 * @returns {string} its command line, or "" where that cannot be read
 */
export function commandLine(pid) {
  try {
    if (existsSync("/proc/self/cmdline")) {
      return readFileSync(`/proc/${pid}/cmdline`, "utf8").replaceAll("\0", " ").trim();
    }
    return ps(pid, "command=");
  } catch {
    return "";
  }
}

/**
 * @param {number} pid
 * @returns {number | null} the process that started it
 */
export function parentOf(pid) {
  try {
    return existsSync("/proc/self/stat") ? Number(statFields(pid)[1]) : Number(ps(pid, "ppid="));
  } catch {
    return null;
  }
}

/** @param {number} pid */
function startFromProc(pid) {
  try {
    const fields = statFields(pid);
    if (fields[0] === "Z" || fields[0] === "X") return null;
    const boot = readFileSync("/proc/sys/kernel/random/boot_id", "utf8").trim();
    return `${boot} ${fields[19]}`;
  } catch {
    return null;
  }
}

/**
 * The fields of /proc/PID/stat from the third (state) on; the second, the name, may itself hold spaces.
 * @param {number} pid
 */
function statFields(pid) {
  const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
  return stat.slice(stat.lastIndexOf(")") + 2).split(" ");
}

/** @param {number} pid */
function startFromPs(pid) {
  try {
    return ps(pid, "lstart=") || null;
  } catch {
    return null;
  }
}

/**
 * @param {number} pid
 * @param {string} column
 */
function ps(pid, column) {
  return execFileSync("ps", ["-o", column, "-p", String(pid)], { encoding: "utf8" }).trim();
}
