import { stripVTControlCharacters } from "node:util";
import { lastWords, runProgram } from "./run-program.mjs";
import { Problem } from "./problem.mjs";
import { projectRoot } from "./paths.mjs";

/** Node.js's arguments that make it run our TypeScript. */
export const typeScript = ["--import", "tsx"];

/**
 * Runs one of the project's own TypeScript programs to its end.
 * @param {object} options
 * @param {string} options.script path from the project's folder
 * @param {string[]} [options.args]
 * @param {NodeJS.ProcessEnv} options.env
 * @param {string} options.failure what did not work, at the start of a sentence
 * @param {boolean} [options.show] pass its output to the terminal
 * @param {AbortSignal} options.stopping
 */
export async function runScript({ script, args = [], env, failure, show = false, stopping }) {
  const { code, output } = await runProgram({
    program: process.execPath, args: [...typeScript, script, ...args], cwd: projectRoot, env, show, stopping,
  });
  if (code === 0) return;
  const reason = errorLine(output);
  throw new Problem(reason ? `${failure}: ${reason}.` : `${failure}.`);
}

/**
 * The line of a program's output that names its error.
 * @param {string} output
 * @returns {string}
 */
export function errorLine(output) {
  const plain = stripVTControlCharacters(output);
  const lines = plain.split("\n").map((line) => line.trim());
  const named = lines.find((line) => /^(([A-Z]\w*)?(Error|Exception)\b.*:|\[[A-Z_]{3,}\] )/.test(line));
  return (named ?? lastWords(plain)).replace(/\.$/, "");
}
