import { existsSync } from "node:fs";
import { runsAsRoot } from "./postgres/postgres-user.mjs";
import { Problem } from "./problem.mjs";
import { lastWords, mustRun, runProgram } from "./run-program.mjs";

const isDebian = () => existsSync("/usr/bin/apt-get");

/**
 * Installs packages from Debian, as root; otherwise says in one line what to install.
 * @param {object} options
 * @param {string} options.what what is missing, in words, at the start of a sentence
 * @param {string[]} options.packages Debian's names
 * @param {(line: string) => void} options.say
 * @param {AbortSignal} options.stopping
 * @param {() => void} [options.prepare] runs just before the installation
 * @param {string} [options.otherwise] another way out, such as a variable to set
 */
export async function installFromDebian({ what, packages, say, stopping, prepare, otherwise = "" }) {
  if (!isDebian() || !runsAsRoot()) throw new Problem(installSentence({ what, packages, otherwise }));
  say(`${what} is not installed: installing it from Debian (${packages.join(" ")}) …`);
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive", LC_ALL: "C" };
  // A stale list is no reason to stop: the installation itself tells when a package cannot be had.
  await runProgram({ program: "apt-get", args: ["update", "-q"], env, stopping });
  prepare?.();
  await mustRun({
    program: "apt-get",
    args: ["install", "-y", "-q", "--no-install-recommends", "-o", "Dpkg::Options::=--force-confold", ...packages],
    env,
    stopping,
    failure: (output) =>
      `Debian could not install ${packages.join(" ")} (${lastWords(output)}): ` +
      "check the network and /etc/apt, then try again.",
  });
}

/**
 * @param {{ what: string, packages: string[], otherwise?: string, debian?: boolean }} options
 * @returns {string}
 */
export function installSentence({ what, packages, otherwise = "", debian = isDebian() }) {
  const how = debian
    ? `install it with "sudo apt-get install ${packages.join(" ")}"`
    : `install it (Debian calls it ${packages.join(" ")})`;
  return `${what} is not installed: ${how}${otherwise ? `, or ${otherwise}` : ""}, then try again.`;
}
