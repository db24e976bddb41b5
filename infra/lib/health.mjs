import { pause } from "./command.mjs";
import { Problem } from "./problem.mjs";

const longestMs = 60_000;

/**
 * Waits until the application says it is well.
 * @param {{ url: string, log: string, stopping: AbortSignal }} options
 */
export async function waitForHealth({ url, log, stopping }) {
  const deadline = Date.now() + longestMs;
  while (Date.now() < deadline) {
    if (await isHealthy(url)) return;
    await pause(150, stopping);
  }
  throw new Problem(`The application did not answer at ${url} within ${longestMs / 1000} s: see the end of ${log}.`);
}

/** @param {string} url */
async function isHealthy(url) {
  try {
    const response = await fetch(`${url}/api/health`, { signal: AbortSignal.timeout(5_000) });
    const body = await response.json();
    return response.ok && body.status === "ok";
  } catch {
    return false;
  }
}
