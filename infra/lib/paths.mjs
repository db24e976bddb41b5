import { fileURLToPath } from "node:url";

/** The checkout's own folder, without a slash at its end. */
export const projectRoot = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");
