import { setTimeout as sleep } from "node:timers/promises";
import { isAlive } from "./process-identity.mjs";

/**
 * Asks a process to end and waits; ends it by force when it does not in time. A stranger that has since got the
 * same number is never touched.
 * @param {import("./process-identity.mjs").ProcessIdentity | null} identity
 * @param {{ graceMs?: number }} [options]
 * @returns {Promise<boolean>} whether there was something to stop
 */
export async function stopProcess(identity, { graceMs = 10_000 } = {}) {
  if (!identity || !isAlive(identity)) return false;
  send(identity.pid, "SIGTERM");
  const deadline = Date.now() + graceMs;
  while (isAlive(identity) && Date.now() < deadline) await sleep(50);
  if (isAlive(identity)) endByForce(identity.pid);
  while (isAlive(identity) && Date.now() < deadline + 5_000) await sleep(20);
  return true;
}

/**
 * A part leads a group of its own; what it started itself must not outlive it.
 * @param {number} pid
 */
function endByForce(pid) {
  // A container's first process leads everything, which is no group of ours.
  if (pid > 1) send(-pid, "SIGKILL");
  send(pid, "SIGKILL");
}

/**
 * @param {number} pid
 * @param {NodeJS.Signals} signal
 */
function send(pid, signal) {
  try {
    process.kill(pid, signal);
  } catch (error) {
    // It ended between the look and the signal.
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== "ESRCH") throw error;
  }
}
