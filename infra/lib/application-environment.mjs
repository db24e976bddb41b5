import { databaseUrl } from "./postgres/cluster.mjs";

/** What the file store's stand-in is called with; it checks neither key nor signature. */
export const standInStore = { bucket: "shelftide", region: "us-east-1", key: "S3RVER" };

/**
 * The environment of everything that runs the application's code: the person's own, with each embedded part's
 * address where no real service was named.
 * @param {object} options
 * @param {import("./settings.mjs").Settings} options.settings
 * @param {import("./state.mjs").State} options.state with the ports of the embedded parts
 * @param {boolean} options.hasDemo whether demo accounts may exist
 * @param {string} [options.mode] NODE_ENV
 * @param {string} [options.publicUrl] the address people type; PUBLIC_URL of the person's own goes before it
 * @param {NodeJS.ProcessEnv} [options.env]
 * @returns {NodeJS.ProcessEnv}
 */
export function applicationEnvironment({ settings, state, hasDemo, mode = "production", publicUrl, env = process.env }) {
  const { port, embedsDatabase, embedsFiles, embedsMail } = settings;
  // A part that was never started has no port yet: commands that need only the database leave it so.
  const { database = 0, files = 0, smtp = 0 } = state.ports;
  // Whether demo accounts may exist is decided here alone; an empty variable counts as one that is not set.
  const own = Object.fromEntries(Object.entries(env).filter(([name, value]) => value && name !== "SHELFTIDE_EMBEDDED"));
  return {
    SESSION_SECRET: state.sessionSecret,
    PUBLIC_URL: publicUrl ?? `http://127.0.0.1:${port}`,
    ...own,
    ...(embedsDatabase && { DATABASE_URL: databaseUrl({ port: database, password: state.databasePassword }) }),
    ...(embedsFiles && {
      S3_ENDPOINT: `http://127.0.0.1:${files}`,
      S3_REGION: standInStore.region,
      S3_BUCKET: standInStore.bucket,
      S3_ACCESS_KEY_ID: standInStore.key,
      S3_SECRET_ACCESS_KEY: standInStore.key,
    }),
    ...(embedsMail && {
      SMTP_URL: `smtp://127.0.0.1:${smtp}`,
      MAIL_FROM: env.MAIL_FROM ?? "Shelftide <shelftide@larkmoor.example>",
    }),
    ...(hasDemo && { SHELFTIDE_EMBEDDED: "1" }),
    PORT: String(port),
    HOST: "127.0.0.1",
    NODE_ENV: mode,
    // The S3 client otherwise prints a notice about Node.js versions at every start.
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true",
  };
}
