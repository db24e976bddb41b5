import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";

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
