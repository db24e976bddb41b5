import { spawn } from "node:child_process";
import { closeSync, existsSync, openSync, renameSync, statSync } from "node:fs";
import { Problem } from "./problem.mjs";
import { identify } from "./process-identity.mjs";
import { stopProcess } from "./stop-process.mjs";

const mostLogBytes = 10 * 2 ** 20;

/**
 * A long-running Node.js process of ours.
 * @typedef {object} Part
 * @property {string} name in words, such as "web process"
 * @property {string[]} args Node.js's arguments
 * @property {NodeJS.ProcessEnv} env
 * @property {string} [cwd]
 * @property {string} [log] the file its output goes to; without it the terminal
 * @property {boolean} [announces] it sends the message "ready" once it can be used
 */

/**
 * @typedef {object} RunningPart
 * @property {number} pid
 * @property {Promise<void>} ready
 * @property {Promise<never>} failed rejects when it ends, in a sentence
 * @property {Promise<string>} ended how it ended, in words, such as "code 1"
 * @property {() => Promise<void>} stop
 */

/**
 * Starts a part. Its channel to this process tells it when this one is gone, even by force.
 * @param {Part} part
 * @returns {RunningPart}
 */
export function startPart({ name, args, env, cwd, log, announces = false }) {
  const output = log === undefined ? "inherit" : openLog(log);
  const child = spawn(process.execPath, args, { env, cwd, detached: true, stdio: ["ignore", output, output, "ipc"] });
  if (typeof output === "number") closeSync(output);
  const pid = child.pid;
  if (pid === undefined) throw new Problem(`The ${name} could not be started: too many processes, or no memory left.`);
  const identity = identify(pid);
  /** @type {Promise<string>} */
  const ended = new Promise((resolve) => {
    child.on("exit", (code, signal) => resolve(signal ? `signal ${signal}` : `code ${code}`));
    child.on("error", (error) => resolve(error.message));
  });
  const announced = new Promise((resolve) => child.on("message", (message) => message === "ready" && resolve(undefined)));
  const failed = ended.then((how) => {
    throw new Problem(`The ${name} ended at once (${how})${log ? `: the reason stands at the end of ${log}` : ""}.`);
  });
  failed.catch(() => undefined);
  const ready = announces ? Promise.race([announced, failed]).then(() => undefined) : Promise.resolve();
  return {
    pid, ready, failed, ended,
    async stop() {
      await stopProcess(identity);
    },
  };
}

/** @param {string} path */
function openLog(path) {
  if (existsSync(path) && statSync(path).size > mostLogBytes) renameSync(path, `${path}.before`);
  return openSync(path, "a", 0o600);
}
