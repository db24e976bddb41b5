import { existsSync, readdirSync } from "node:fs";
import { join } from "node:path";
import { runCommand } from "./lib/command.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { projectRoot } from "./lib/paths.mjs";
import { Problem } from "./lib/problem.mjs";
import { runProgram } from "./lib/run-program.mjs";
import { typeScript } from "./lib/script.mjs";

// npm run bench -- NAME [--json]: measures one thing. Without a name: the names there are.
const folder = join(projectRoot, "tests/bench");

await runCommand(async ({ stopping }) => {
  const names = existsSync(folder)
    ? readdirSync(folder).filter((file) => file.endsWith(".ts")).map((file) => file.slice(0, -".ts".length)).sort()
    : [];
  const [name, ...args] = process.argv.slice(2);
  if (name === undefined) {
    console.log(names.length > 0 ? `npm run bench -- NAME [--json], with NAME one of: ${names.join(", ")}` : "There are no benches yet.");
    return 0;
  }
  if (!names.includes(name)) throw new Problem(`There is no bench "${name}": choose one of ${names.join(", ") || "none yet"}.`);
  // With --json the last line is for a script to read, so nothing else goes to standard output.
  await ensurePackages({ say: (line) => console.error(line), stopping, withTools: true });
  const { code } = await runProgram({
    program: process.execPath, args: [...typeScript, join(folder, `${name}.ts`), ...args], cwd: projectRoot, show: true, stopping,
  });
  return code;
});
