import { parsePort } from "./ports.mjs";
import { Problem } from "./problem.mjs";

/**
 * Which parts a person replaced by real services, and the port people will use; read from the environment.
 * @typedef {object} Settings
 * @property {number} port
 * @property {boolean} embedsDatabase
 * @property {boolean} embedsFiles
 * @property {boolean} embedsMail
 * @property {boolean} namesSender whether MAIL_FROM says whom mail comes from
 * @property {boolean} wantsDemo
 */

const storeVariables = ["S3_BUCKET", "S3_ACCESS_KEY_ID", "S3_SECRET_ACCESS_KEY"];
const storeOptions = ["S3_ENDPOINT", "S3_REGION"];

/**
 * @param {NodeJS.ProcessEnv} [env]
 * @returns {Settings}
 */
export function readSettings(env = process.env) {
  const embedsFiles = ![...storeVariables, ...storeOptions].some((name) => env[name]);
  if (!embedsFiles) checkStore(env);
  const demo = env.SHELFTIDE_DEMO ?? "on";
  if (!["on", "off"].includes(demo)) throw new Problem(`SHELFTIDE_DEMO=${demo} is neither on nor off: give one of the two.`);
  return {
    port: parsePort(env.PORT, { name: "PORT", usual: 4310 }),
    embedsDatabase: !env.DATABASE_URL,
    embedsFiles,
    embedsMail: !env.SMTP_URL,
    namesSender: Boolean(env.MAIL_FROM),
    wantsDemo: demo === "on",
  };
}

/** @param {NodeJS.ProcessEnv} env */
function checkStore(env) {
  const missing = storeVariables.filter((name) => !env[name]);
  if (missing.length === 0) return;
  throw new Problem(
    `A file store is named in the environment but ${missing.join(" and ")} ${missing.length > 1 ? "are" : "is"} not set: ` +
      "set all of S3_BUCKET, S3_ACCESS_KEY_ID and S3_SECRET_ACCESS_KEY " +
      "(with S3_ENDPOINT and S3_REGION where needed), or no S3_ variable at all.",
  );
}

/**
 * Whether the demo is loaded, kept or left out. An installation that was started empty stays empty, so that demo
 * accounts, whose password everyone knows, never appear beside real people.
 * @param {{ embedsDatabase: boolean, wantsDemo: boolean, remembered: "loaded" | "empty" | null }} options
 * @returns {"load" | "keep" | "none"}
 */
export function planDemo({ embedsDatabase, wantsDemo, remembered }) {
  if (!embedsDatabase) return "none";
  if (remembered === "loaded") return "keep";
  return remembered === null && wantsDemo ? "load" : "none";
}
