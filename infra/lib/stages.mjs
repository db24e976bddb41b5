import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { projectRoot } from "./paths.mjs";
import { Stopped, sentenceFor } from "./problem.mjs";
import { runProgram } from "./run-program.mjs";
import { countStage, sum, summaryLine } from "./test-count.mjs";

/**
 * One step of a test run.
 * @typedef {object} Stage
 * @property {string} name what a person types to run it alone
 * @property {string} title
 * @property {(args: string[]) => Promise<import("./test-count.mjs").Count>} run
 */

/**
 * Runs stages one after the other, all of them whatever fails, and ends with the summary.
 * @param {{ stages: Stage[], args?: string[], say: (line: string) => void }} options `args` go to the tests' runner
 * @returns {Promise<number>} the exit code
 */
export async function runStages({ stages, args = [], say }) {
  const counts = [];
  const lines = [];
  const startedMs = Date.now();
  for (const stage of stages) {
    say(`\n── ${stage.title} ${"─".repeat(Math.max(3, 70 - stage.title.length))}`);
    const startMs = Date.now();
    const count = await runStage(stage, args, say);
    const line = `${stage.title}: ${count.failed === 0 ? "ok" : "FAILED"} in ${seconds(Date.now() - startMs)} s`;
    say(line);
    counts.push(count);
    lines.push(line);
  }
  const total = sum(counts);
  if (stages.length > 1) say(`\n${lines.join("\n")}\nAll: ${seconds(Date.now() - startedMs)} s`);
  say(`\n${summaryLine(total)}`);
  return total.failed === 0 ? 0 : 1;
}

/**
 * @param {Stage} stage
 * @param {string[]} args
 * @param {(line: string) => void} say
 */
async function runStage(stage, args, say) {
  try {
    return await stage.run(args);
  } catch (error) {
    if (error instanceof Stopped) throw error;
    say(sentenceFor(error));
    return { passed: 0, failed: 1 };
  }
}

/** @param {number} durationMs */
const seconds = (durationMs) => (durationMs / 1000).toFixed(1);

/**
 * A stage that is one program, which passes or fails as a whole.
 * @param {{ program?: string, args: string[], env?: NodeJS.ProcessEnv, stopping: AbortSignal }} options
 * @returns {Promise<import("./test-count.mjs").Count>}
 */
export async function runCheck({ program = process.execPath, args, env, stopping }) {
  const { code } = await runProgram({ program, args, env, cwd: projectRoot, show: true, stopping });
  return { passed: 0, failed: code === 0 ? 0 : 1 };
}

/**
 * Runs one of vitest's projects and counts its tests.
 * @param {object} options
 * @param {string} options.project
 * @param {string[]} options.args more arguments for vitest, such as a file
 * @param {Record<string, string>} [options.env] added to the environment
 * @param {AbortSignal} options.stopping
 * @returns {Promise<import("./test-count.mjs").Count>}
 */
export async function runVitest({ project, args, env = {}, stopping }) {
  const folder = mkdtempSync(join(tmpdir(), "shelftide-report-"));
  const reportFile = join(folder, "report.json");
  try {
    const { code } = await runProgram({
      program: process.execPath,
      args: [
        join(projectRoot, "node_modules/vitest/vitest.mjs"), "run", "--project", project,
        "--reporter=default", "--reporter=json", `--outputFile.json=${reportFile}`, ...args,
      ],
      env: { ...process.env, ...env },
      cwd: projectRoot,
      show: true,
      stopping,
    });
    return countStage({ report: readReport(reportFile), exitCode: code, isSelection: args.length > 0 });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** @param {string} path */
function readReport(path) {
  try {
    return readFileSync(path, "utf8");
  } catch {
    return null;
  }
}
