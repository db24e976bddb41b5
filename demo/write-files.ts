import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { parseArgs } from "node:util";
import { dirtyExtract } from "./dirty-extract";
import { defaultSeed, generateDemo } from "./generate";
import { writeDemo } from "./write";

const { positionals, values } = parseArgs({
  allowPositionals: true,
  options: { today: { type: "string" }, seed: { type: "string" }, gzip: { type: "boolean", default: false } },
});

if (positionals.length !== 1) {
  console.error("Say where to: node --import tsx demo/write-files.ts FOLDER [--today 2026-06-01] [--seed 1] [--gzip]");
  process.exit(1);
}

const demo = generateDemo({ seed: values.seed === undefined ? defaultSeed : Number(values.seed), today: values.today });
const paths = await writeDemo({ demo, folder: positionals[0], gzipSales: values.gzip });
const dirty = dirtyExtract(demo);
const dirtyPath = join(positionals[0], dirty.name);
await writeFile(dirtyPath, dirty.bytes);
console.log([...paths, dirtyPath].join("\n"));
