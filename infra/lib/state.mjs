import { randomBytes } from "node:crypto";
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { Problem } from "./problem.mjs";
import { writePrivateFile } from "./write-file.mjs";

/**
 * What an installation remembers from start to start, in state.json of its data folder.
 * @typedef {object} State
 * @property {1} version
 * @property {{ database?: number, files?: number, smtp?: number, mailPage?: number }} ports of the embedded parts
 * @property {string} databasePassword of the embedded database
 * @property {string} sessionSecret signs the session cookies
 * @property {"loaded" | "empty" | null} demo null until the first start has decided
 * @property {string | null} schema hash of the migrations that the embedded database has run; null: not known
 */

/**
 * @param {string} folder the data folder
 * @returns {State} what was remembered; a new one, not yet written, on the first start
 */
export function readState(folder) {
  const path = join(folder, "state.json");
  let text;
  try {
    text = readFileSync(path, "utf8");
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== "ENOENT") throw error;
    return newState();
  }
  const state = parse(text);
  if (state) return state;
  throw new Problem(
    `${path} cannot be read as an installation's state: put it back from a copy, ` +
      `or move the folder ${folder} away to begin anew.`,
  );
}

/**
 * @param {string} folder
 * @param {State} state
 */
export function writeState(folder, state) {
  writePrivateFile(join(folder, "state.json"), `${JSON.stringify(state, null, 2)}\n`);
}

/** @returns {State} */
export function newState() {
  return {
    version: 1,
    ports: {},
    databasePassword: randomBytes(24).toString("hex"),
    sessionSecret: randomBytes(32).toString("hex"),
    demo: null,
    schema: null,
  };
}

/**
 * @param {string} text
 * @returns {State | null}
 */
function parse(text) {
  let value;
  try {
    value = JSON.parse(text);
  } catch {
    return null;
  }
  const isWhole =
    value?.version === 1 &&
    typeof value.databasePassword === "string" &&
    typeof value.sessionSecret === "string" &&
    typeof value.ports === "object" &&
    value.ports !== null &&
    Object.values(value.ports).every(Number.isInteger) &&
    [null, "loaded", "empty"].includes(value.demo) &&
    (value.schema == null || typeof value.schema === "string");
  return isWhole ? value : null;
}
