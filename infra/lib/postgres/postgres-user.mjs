import { execFileSync } from "node:child_process";
import { chownSync, existsSync, statSync } from "node:fs";
import { Problem } from "../problem.mjs";

// PostgreSQL refuses to run as root, so root runs it as the user that Debian's package makes.
const user = "postgres";

export function runsAsRoot() {
  return process.getuid?.() === 0;
}

/**
 * Whether PostgreSQL's user can pass through a folder. Before the package is installed there is no such user; then
 * the rights of any other user are what counts.
 * @param {string} folder
 */
export function postgresUserReaches(folder) {
  const asUser = userId("-u") === null ? "nobody" : user;
  try {
    execFileSync("runuser", ["-u", asUser, "--", "test", "-x", folder], { stdio: "ignore", cwd: "/" });
    return true;
  } catch {
    return false;
  }
}

/**
 * Gives a file or folder to the user PostgreSQL runs as; when that is the present user, it has it already.
 * @param {string} path
 */
export function giveToPostgres(path) {
  if (!runsAsRoot()) return;
  const uid = userId("-u");
  const gid = userId("-g");
  if (uid !== null && gid !== null) chownSync(path, uid, gid);
}

/**
 * Refuses a database folder that another user made: PostgreSQL would refuse it less clearly.
 * @param {string} folder
 */
export function checkDatabaseOwner(folder) {
  const wanted = runsAsRoot() ? userId("-u") : (process.getuid?.() ?? null);
  if (wanted === null || !existsSync(folder)) return;
  const { uid } = statSync(folder);
  if (uid === wanted) return;
  throw new Problem(
    `The database in ${folder} belongs to another user (number ${uid}): ` +
      "start as the user who started it first, or move it away to begin anew.",
  );
}

/**
 * A program's command line, as the user PostgreSQL runs as.
 * @param {string} program
 * @param {string[]} args
 */
export function asPostgresUser(program, args) {
  return runsAsRoot() ? { program: "runuser", args: ["-u", user, "--", program, ...args] } : { program, args };
}

/** @param {"-u" | "-g"} which */
function userId(which) {
  try {
    return Number(execFileSync("id", [which, user], { encoding: "utf8", stdio: ["ignore", "pipe", "ignore"] }));
  } catch {
    return null;
  }
}
