import { linkSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { Problem } from "./problem.mjs";
import { commandLine, identify, isAlive, parentOf } from "./process-identity.mjs";
import { stopProcess } from "./stop-process.mjs";
import { writePrivateFile } from "./write-file.mjs";

/**
 * Which command has the data folder now, in running.json: one at a time, so that a database is never started twice.
 * What it names is enough to clear up after a command that was ended by force.
 * @typedef {object} Turn
 * @property {string} command such as "npm start"
 * @property {string | null} address where the application answers
 * @property {import("./process-identity.mjs").ProcessIdentity} owner
 * @property {import("./process-identity.mjs").ProcessIdentity | null} launcher the npm that started the owner
 * @property {Record<string, import("./process-identity.mjs").ProcessIdentity>} children by their part's name
 */

/**
 * Takes the turn; ends what a command left behind that was itself ended by force.
 * @param {{ folder: string, command: string, say: (line: string) => void }} options
 */
export async function takeTurn({ folder, command, say }) {
  const path = join(folder, "running.json");
  /** @type {Turn} */
  const turn = { command, address: null, owner: ownIdentity(), launcher: findLauncher(), children: {} };
  for (let attempt = 0; attempt < 5; attempt += 1) {
    if (createWhole(path, turn)) return turnHandle(path, turn);
    await clearLeftovers(folder, say);
  }
  throw new Problem(`${path} is being changed by another command: wait a moment, then try again.`);
}

/**
 * @param {string} folder
 * @returns {Turn | null} the turn of a command that is alive
 */
export function readTurn(folder) {
  const turn = parseTurn(join(folder, "running.json"));
  return turn && isAlive(turn.owner) ? turn : null;
}

/**
 * @param {string} folder
 * @returns {boolean} whether a command that was ended by force had the turn here last
 */
export function isLeftBehind(folder) {
  const turn = parseTurn(join(folder, "running.json"));
  return turn !== null && stateOfTurn(turn) === "left behind";
}

/**
 * What other commands should do about a turn that is on file.
 * @param {Turn} turn
 * @param {(identity: import("./process-identity.mjs").ProcessIdentity | null) => boolean} [alive]
 * @returns {"held" | "orphaned" | "left behind"} orphaned: its owner lives on although the npm that started it was
 *   ended by force
 */
export function stateOfTurn(turn, alive = isAlive) {
  if (!alive(turn.owner)) return "left behind";
  return turn.launcher && !alive(turn.launcher) ? "orphaned" : "held";
}

/**
 * Stops what a command left running that was ended by force, and forgets its turn.
 * @param {string} folder
 * @param {(line: string) => void} say
 */
export async function clearLeftovers(folder, say) {
  const path = join(folder, "running.json");
  const turn = parseTurn(path);
  if (turn) {
    const found = stateOfTurn(turn);
    if (found === "held") throw new Problem(heldSentence(turn));
    if (found === "orphaned") {
      say(`An earlier ${turn.command} (process ${turn.owner.pid}) lost the npm that started it: stopping it.`);
      await stopProcess(turn.owner, { graceMs: 20_000 });
    }
    for (const [name, child] of Object.entries(turn.children)) {
      const stopped = await stopProcess(child);
      if (stopped) say(`Stopped the ${name} (process ${child.pid}) that an earlier ${turn.command} left running.`);
    }
  }
  rmSync(path, { force: true });
}

/**
 * @param {Turn} turn
 * @returns {string}
 */
export function heldSentence({ command, address, owner }) {
  const found = address
    ? `is already running here at ${address} (process ${owner.pid}): use that one`
    : `is at work here (process ${owner.pid}): wait until it is done`;
  return `"${command}" ${found}, or stop it (Ctrl-C in its window, or kill ${owner.pid}), then try again.`;
}

/**
 * @param {string} path
 * @param {Turn} turn
 */
function turnHandle(path, turn) {
  let isHeld = true;
  const write = () => {
    if (isHeld) writePrivateFile(path, JSON.stringify(turn, null, 2));
  };
  return {
    turn,
    /** @param {string} address */
    setAddress(address) {
      turn.address = address;
      write();
    },
    /**
     * @param {string} name
     * @param {number} pid
     */
    addChild(name, pid) {
      const identity = identify(pid);
      if (!identity) return;
      turn.children[name] = identity;
      write();
    },
    /** @param {string} name */
    removeChild(name) {
      delete turn.children[name];
      write();
    },
    giveBack() {
      isHeld = false;
      rmSync(path, { force: true });
    },
  };
}

/** @typedef {ReturnType<typeof turnHandle>} TurnHandle */

/**
 * A link appears whole or not at all, and never over another one.
 * @param {string} path
 * @param {Turn} turn
 */
function createWhole(path, turn) {
  const half = `${path}.${process.pid}.half`;
  writeFileSync(half, JSON.stringify(turn, null, 2), { mode: 0o600 });
  try {
    linkSync(half, path);
    return true;
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code === "EEXIST") return false;
    throw error;
  } finally {
    rmSync(half, { force: true });
  }
}

/**
 * @param {string} path
 * @returns {Turn | null}
 */
function parseTurn(path) {
  try {
    const turn = JSON.parse(readFileSync(path, "utf8"));
    return turn?.owner && turn.children ? turn : null;
  } catch {
    return null;
  }
}

function ownIdentity() {
  return identify(process.pid) ?? { pid: process.pid, startedAt: "unknown" };
}

/** The npm that runs this command, where one does: at most two steps up, a shell may stand between. */
function findLauncher() {
  let pid = process.env.npm_lifecycle_event ? process.ppid : null;
  for (let step = 0; step < 2 && pid; step += 1) {
    if (/(^|[\s/])npm(-cli\.js)?(\s|$)/.test(commandLine(pid))) return identify(pid);
    pid = parentOf(pid);
  }
  return null;
}

/**
 * Ends the command when the npm that started it has gone without passing a signal on (ended by force).
 * @param {{ turn: Turn, context: import("./command.mjs").Context }} options
 */
export async function watchLauncher({ turn, context }) {
  if (!turn.launcher) return;
  while (!context.stopping.aborted) {
    await sleep(250, undefined, { ref: false });
    if (!isAlive(turn.launcher)) return context.stop("The npm that started this is gone: stopping as well.");
  }
}
