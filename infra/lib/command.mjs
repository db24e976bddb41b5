import { checkNodeVersion } from "./node-version.mjs";
import { sentenceFor, Stopped } from "./problem.mjs";

// What shells report for a program that Ctrl-C ended.
const interruptedCode = 130;

/**
 * What a command is given to work with.
 * @typedef {object} Context
 * @property {AbortSignal} stopping aborted once the command is asked to stop
 * @property {(close: () => unknown) => void} onClose registers what must be undone; undone last first, whatever happened
 * @property {(sentence: string) => void} stop ends the command from within: says why and exits with code 1
 */

/**
 * Runs a command from its first check to its exit code: refuses an old Node.js, turns SIGINT, SIGTERM and
 * SIGHUP into an orderly stop, undoes what was started, and shows a failure as one sentence.
 * @param {(context: Context) => Promise<number | void>} main resolves to the exit code (0 when it names none)
 */
export async function runCommand(main) {
  const abort = new AbortController();
  /** @type {(() => unknown)[]} */
  const closers = [];
  let stopSentence = "";
  const context = {
    stopping: abort.signal,
    onClose: (/** @type {() => unknown} */ close) => void closers.push(close),
    stop: (/** @type {string} */ sentence) => {
      stopSentence ||= sentence;
      abort.abort(new Stopped());
    },
  };
  for (const name of ["SIGINT", "SIGTERM", "SIGHUP"]) {
    process.on(name, () => abort.abort(new Stopped()));
  }

  let exitCode;
  try {
    checkNodeVersion();
    exitCode = (await main(context)) ?? 0;
  } catch (error) {
    exitCode = report(error, abort.signal);
  }
  // Whatever waits or would restart something sees that the command is ending.
  abort.abort(new Stopped());
  for (const close of closers.reverse()) {
    try {
      await close();
    } catch (error) {
      exitCode = report(error);
    }
  }
  if (stopSentence) {
    console.error(stopSentence);
    exitCode = 1;
  }
  process.exit(exitCode);
}

/**
 * @param {unknown} error
 * @param {AbortSignal} [stopping]
 * @returns {number} the exit code
 */
function report(error, stopping) {
  if (stopping?.aborted) return interruptedCode;
  console.error(sentenceFor(error));
  if (process.env.SHELFTIDE_DEBUG) console.error(error);
  return 1;
}

/**
 * Waits; ends early with Stopped when the command is asked to stop.
 * @param {number} durationMs
 * @param {AbortSignal} stopping
 * @returns {Promise<void>}
 */
export function pause(durationMs, stopping) {
  return new Promise((resolve, reject) => {
    if (stopping.aborted) return reject(new Stopped());
    const end = () => {
      clearTimeout(timer);
      reject(new Stopped());
    };
    const timer = setTimeout(() => {
      stopping.removeEventListener("abort", end);
      resolve();
    }, durationMs);
    stopping.addEventListener("abort", end, { once: true });
  });
}

/**
 * Resolves once the command is asked to stop.
 * @param {AbortSignal} stopping
 * @returns {Promise<void>}
 */
export function untilStopped(stopping) {
  return new Promise((resolve) => {
    if (stopping.aborted) return resolve();
    // An abort listener alone does not keep the process alive.
    const keepAlive = setInterval(() => undefined, 60_000);
    stopping.addEventListener("abort", () => {
      clearInterval(keepAlive);
      resolve();
    }, { once: true });
  });
}
