import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { hashSources } from "./hash-sources.mjs";
import { projectRoot } from "./paths.mjs";
import { errorLine } from "./script.mjs";
import { mustRun } from "./run-program.mjs";

const sources = ["src", "shared", "public", "index.html", "vite.config.ts", "tsconfig.json", "package-lock.json"];

/**
 * Builds the client when its sources are not those of the last build. What they hold is compared, not their times:
 * a clone or a switch of branches changes times at will.
 * @param {{ say: (line: string) => void, stopping: AbortSignal }} options
 */
export async function ensureClientBuild({ say, stopping }) {
  const noteFile = join(projectRoot, "dist", "client-sources");
  const hash = hashSources(projectRoot, sources);
  const isCurrent = existsSync(join(projectRoot, "dist/client/index.html")) && readNote(noteFile) === hash;
  if (isCurrent) return;
  say("Building the client …");
  await mustRun({
    program: process.execPath,
    args: [join(projectRoot, "node_modules/vite/bin/vite.js"), "build", "--logLevel", "warn"],
    cwd: projectRoot,
    env: { ...process.env, NODE_ENV: "production" },
    stopping,
    failure: (output) => `The client could not be built: ${errorLine(output)} (npm run build shows more).`,
  });
  mkdirSync(join(projectRoot, "dist"), { recursive: true });
  writeFileSync(noteFile, hash);
}

/** @param {string} path */
function readNote(path) {
  return existsSync(path) ? readFileSync(path, "utf8") : null;
}
