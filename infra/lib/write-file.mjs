import { renameSync, rmSync, writeFileSync } from "node:fs";

/**
 * Writes a file whole or not at all, readable by its owner alone.
 * @param {string} path
 * @param {string} text
 */
export function writePrivateFile(path, text) {
  const half = `${path}.${process.pid}.half`;
  rmSync(half, { force: true });
  writeFileSync(half, text, { mode: 0o600, flush: true });
  renameSync(half, path);
}
