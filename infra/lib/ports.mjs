import { randomInt } from "node:crypto";
import { createServer } from "node:net";
import { Problem } from "./problem.mjs";

// Below the range from which systems hand out ports for outgoing connections (Linux: from 32768), so that a
// remembered port is seldom found taken.
const firstPort = 20_000;
const lastPort = 29_999;

/**
 * Tries to listen on 127.0.0.1.
 * @param {number} port
 * @returns {Promise<string | null>} null when a server could listen there now, else the system's code (EADDRINUSE)
 */
export function portTrouble(port) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once("error", (error) => resolve(/** @type {NodeJS.ErrnoException} */ (error).code ?? "unknown"));
    probe.listen({ port, host: "127.0.0.1", exclusive: true }, () => probe.close(() => resolve(null)));
  });
}

/** @param {number} port */
export async function isPortFree(port) {
  return (await portTrouble(port)) === null;
}

/**
 * Refuses a port that people asked for when it cannot be had.
 * @param {number} port
 * @param {string} variable the variable that would choose another
 * @param {string} command what to type then, such as "npm start"
 */
export async function checkPort(port, variable, command) {
  const trouble = await portTrouble(port);
  if (trouble === null) return;
  const other = `choose another port with ${variable}=${port < 1_024 ? port + 8_000 : port + 10} ${command}`;
  if (trouble === "EACCES") throw new Problem(`Port ${port} is reserved for the system's administrator: ${other}.`);
  throw new Problem(`Port ${port} is used by another program: stop that program, or ${other}.`);
}

/**
 * The remembered port when it is free, else a free one drawn by chance.
 * @param {{ remembered?: number, taken?: number[], isFree?: (port: number) => Promise<boolean> }} [options]
 *   `taken`: ports promised to others already
 * @returns {Promise<number>}
 */
export async function pickPort({ remembered, taken = [], isFree = isPortFree } = {}) {
  if (remembered !== undefined && !taken.includes(remembered) && (await isFree(remembered))) return remembered;
  for (let attempt = 0; attempt < 200; attempt += 1) {
    const port = randomInt(firstPort, lastPort + 1);
    if (!taken.includes(port) && (await isFree(port))) return port;
  }
  throw new Problem(`No free port found between ${firstPort} and ${lastPort}: stop other programs, then start again.`);
}

/**
 * @param {string | undefined} text the variable's value
 * @param {{ name: string, usual: number }} of the variable's name, and the port when it is not set
 * @returns {number}
 */
export function parsePort(text, { name, usual }) {
  if (text === undefined || text === "") return usual;
  const port = /^\d+$/.test(text) ? Number(text) : NaN;
  if (port >= 1 && port <= 65_535) return port;
  throw new Problem(`${name}=${text} is not a port: give a whole number from 1 to 65535, such as ${name}=${usual}.`);
}
