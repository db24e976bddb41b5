import { parseArgs } from "node:util";
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
console.log(paths.join("\n"));
