import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
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

/**
 * @param {string} root
 * @param {string[]} paths files and folders under it; missing ones count as missing
 * @returns {string} the same for the same names and contents, else another
 */
export function hashSources(root, paths) {
  const hash = createHash("sha256");
  for (const path of paths) {
    for (const file of filesUnder(root, path)) {
      const content = readFileSync(join(root, file));
      hash.update(`${file}\0${content.length}\0`).update(content);
    }
  }
  return hash.digest("hex");
}

/**
 * @param {string} root
 * @param {string} path
 * @returns {string[]} in a fixed order
 */
function filesUnder(root, path) {
  if (!existsSync(join(root, path))) return [];
  try {
    const names = readdirSync(join(root, path)).sort();
    return names.flatMap((name) => filesUnder(root, join(path, name)));
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code === "ENOTDIR") return [path];
    throw error;
  }
}

/** @param {string} path */
function readNote(path) {
  return existsSync(path) ? readFileSync(path, "utf8") : null;
}
