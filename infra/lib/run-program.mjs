import { spawn } from "node:child_process";
import { Problem, Stopped } from "./problem.mjs";

// npm, asked to end, takes a minute to tidy up what it had begun.
const endGraceMs = 5_000;

/** @type {Pick<import("./turn.mjs").TurnHandle, "addChild" | "removeChild"> | null} */
let record = null;
let stepCount = 0;

/**
 * From now on the programs that run stand in the turn's record, so that none outlives a command that is ended by
 * force: two npm at once would spoil each other's work.
 * @param {import("./turn.mjs").TurnHandle} turn
 */
export function recordPrograms(turn) {
  record = turn;
}

/**
 * @typedef {object} RunOptions
 * @property {string} program
 * @property {string[]} args
 * @property {NodeJS.ProcessEnv} [env]
 * @property {string} [cwd]
 * @property {boolean} [show] pass its output straight to the terminal instead of keeping it
 * @property {AbortSignal} [stopping] ends the program when aborted
 */

/**
 * Runs a program to its end.
 * @param {RunOptions} options
 * @returns {Promise<{ code: number, output: string, standardOutput: string }>} `output` holds both streams, kept
 *   unless shown
 */
export function runProgram({ program, args, env = process.env, cwd, show = false, stopping }) {
  return new Promise((resolve, reject) => {
    if (stopping?.aborted) return reject(new Stopped());
    // A group of its own, so that Ctrl-C reaches this command alone, which then stops the program in order.
    const child = spawn(program, args, {
      env, cwd, detached: true, stdio: ["ignore", show ? "inherit" : "pipe", show ? "inherit" : "pipe"],
    });
    const step = `unfinished step ${(stepCount += 1)}`;
    if (child.pid !== undefined) record?.addChild(step, child.pid);
    let output = "";
    let standardOutput = "";
    child.stdout?.on("data", (chunk) => {
      output += chunk;
      standardOutput += chunk;
    });
    child.stderr?.on("data", (chunk) => (output += chunk));
    /** @type {NodeJS.Timeout | undefined} */
    let force;
    const end = () => {
      signalGroup(child.pid, "SIGTERM");
      force = setTimeout(() => signalGroup(child.pid, "SIGKILL"), endGraceMs);
    };
    const ended = () => {
      clearTimeout(force);
      record?.removeChild(step);
      stopping?.removeEventListener("abort", end);
    };
    stopping?.addEventListener("abort", end, { once: true });
    child.on("error", (error) => {
      ended();
      reject(missingProgram(program, error));
    });
    child.on("close", (code) => {
      ended();
      if (stopping?.aborted) reject(new Stopped());
      else resolve({ code: code ?? 1, output, standardOutput });
    });
  });
}

/**
 * Runs a program that must succeed.
 * @param {RunOptions & { failure: (output: string) => string }} options `failure` makes the sentence
 * @returns {Promise<string>} its standard output
 */
export async function mustRun({ failure, ...options }) {
  const { code, output, standardOutput } = await runProgram(options);
  if (code !== 0) throw new Problem(failure(output.trim()));
  return standardOutput;
}

/**
 * The last lines of a program's output that say something, on one line.
 * @param {string} output
 * @param {number} [count]
 */
export function lastWords(output, count = 1) {
  const lines = output.split("\n").map((line) => line.trim()).filter((line) => line && !/^at .+:\d+:\d+\)?$/.test(line));
  return lines.slice(-count).join(" ").replace(/[.:]$/, "");
}

/**
 * @param {number | undefined} pid
 * @param {NodeJS.Signals} signal
 */
function signalGroup(pid, signal) {
  if (pid === undefined) return;
  try {
    process.kill(-pid, signal);
  } catch {
    // It has ended already.
  }
}

/**
 * @param {string} program
 * @param {NodeJS.ErrnoException} error
 */
function missingProgram(program, error) {
  if (error.code === "ENOENT") return new Problem(`The program ${program} was not found: install it, then try again.`);
  return error;
}
