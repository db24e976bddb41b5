import { existsSync } from "node:fs";
import { installFromDebian } from "./debian.mjs";
import { Problem } from "./problem.mjs";
import { runProgram } from "./run-program.mjs";

const libraries = ["mgcv", "gam", "bayesm", "jsonlite"];
const debianPackages = ["r-base-core", ...libraries.map((library) => `r-cran-${library}`)];

/**
 * Finds R with the packages that the reference checks compare with; installs Debian's as root where one is missing.
 * @param {{ say: (line: string) => void, stopping: AbortSignal }} options
 */
export async function ensureR({ say, stopping }) {
  if (await missingLibraries(stopping) === null) return;
  await installFromDebian({ what: "R with its packages", packages: debianPackages, say, stopping });
  const missing = await missingLibraries(stopping);
  if (missing === null) return;
  throw new Problem(`R still lacks ${missing} after the installation: install it by hand, then try again.`);
}

/**
 * @param {AbortSignal} stopping
 * @returns {Promise<string | null>} null when R has them all
 */
async function missingLibraries(stopping) {
  const onPath = (process.env.PATH ?? "").split(":").some((folder) => existsSync(`${folder}/Rscript`));
  if (!onPath) return "Rscript";
  const names = libraries.map((library) => `"${library}"`).join(", ");
  const expression = `for (name in c(${names})) if (!requireNamespace(name, quietly = TRUE)) cat(name, "")`;
  const { code, standardOutput } = await runProgram({ program: "Rscript", args: ["--vanilla", "-e", expression], stopping });
  if (code !== 0) return "a working Rscript";
  return standardOutput.trim() || null;
}
