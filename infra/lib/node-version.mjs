import { Problem } from "./problem.mjs";

const oldest = { major: 20, minor: 19 };

/**
 * Refuses a Node.js too old for the packages the product stands on.
 * @param {string} version such as "20.20.2"
 */
export function checkNodeVersion(version = process.versions.node) {
  const [major, minor] = version.split(".").map(Number);
  const enough = major > oldest.major || (major === oldest.major && minor >= oldest.minor);
  if (enough) return;
  throw new Problem(
    `Node.js ${version} is too old: install Node.js ${oldest.major}.${oldest.minor} or newer, then start again.`,
  );
}
