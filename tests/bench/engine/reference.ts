import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

/** What reference.R says of one work: medians in milliseconds, and per model its linear predictor and degrees of freedom. */
export type ReferenceWork = { ms: number; linearPredictors: number[][]; edf: number[] };

export type Reference = {
  madeWith: { r: string; packages: { mgcv: string; bayesm: string }; lapack: string };
  blas: string;
  rowCount: number;
  works: Record<string, ReferenceWork>;
};

/** Runs reference.R for the works named; it leaves the rows in the folder as well. */
export function timeReference({ folder, works }: { folder: string; works: readonly string[] }): Reference {
  const script = fileURLToPath(new URL("./reference.R", import.meta.url));
  execFileSync("Rscript", ["--vanilla", script, folder, ...works], {
    stdio: ["ignore", "ignore", "inherit"],
    env: { ...process.env, OMP_NUM_THREADS: "1", OPENBLAS_NUM_THREADS: "1" },
  });
  return JSON.parse(readFileSync(join(folder, "reference.json"), "utf8")) as Reference;
}
