import { existsSync } from "node:fs";
import { installFromDebian } from "./debian.mjs";
import { Problem } from "./problem.mjs";

const debianPath = "/usr/bin/chromium";

/**
 * Finds Chromium (CHROMIUM_PATH, else Debian's), installing Debian's when there is none and this is root.
 * @param {{ say: (line: string) => void, stopping: AbortSignal }} options
 * @returns {Promise<string>} the program's path
 */
export async function ensureChromium({ say, stopping }) {
  const named = process.env.CHROMIUM_PATH;
  if (named && existsSync(named)) return named;
  if (named) throw new Problem(`CHROMIUM_PATH=${named} does not exist: give Chromium's path, or unset it, then try again.`);
  if (existsSync(debianPath)) return debianPath;
  await installFromDebian({
    what: "Chromium", packages: ["chromium"], otherwise: "set CHROMIUM_PATH to one you have", say, stopping,
  });
  return debianPath;
}
