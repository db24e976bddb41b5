import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { performance } from "node:perf_hooks";
import { fileURLToPath } from "node:url";
import { fitModel } from "@shared/engine";
import type { ModelSpec } from "@shared/engine";

/**
 * Times fits of one store and product against R's mgcv, in one run on the same rows: warm medians on both sides.
 * Needs R with mgcv, bayesm and jsonlite, and Debian's reference BLAS.
 */
type Reference = {
  lapack: string; blas: string; mgcv: string; normalMs: number; quasiPoissonMs: number;
  data: { logmove: number[]; units: number[]; price: number[]; woy: number[]; deal: number[]; feat: number[] };
};

const [store, product] = ["2", "7"];
/** How many times quicker than R a fit must be. */
const required = { normal: 100, quasiPoisson: 35 };

const terms: ModelSpec["terms"] = [
  { kind: "smooth", column: "price", log: true, size: 8 },
  { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5], size: 12 },
  { kind: "factor", column: "deal" },
  { kind: "linear", column: "feat" },
];
const normal: ModelSpec = { response: "logmove", family: "gaussian", terms };
const quasiPoisson: ModelSpec = { response: "units", family: "quasi-poisson", terms };

function timeReference(): Reference {
  const folder = mkdtempSync(join(tmpdir(), "engine-bench-"));
  try {
    const output = join(folder, "reference.json");
    const script = fileURLToPath(new URL("./engine-reference.R", import.meta.url));
    execFileSync("Rscript", ["--vanilla", script, output, store, product], {
      stdio: ["ignore", "ignore", "inherit"],
      env: { ...process.env, OMP_NUM_THREADS: "1", OPENBLAS_NUM_THREADS: "1" },
    });
    return JSON.parse(readFileSync(output, "utf8")) as Reference;
  } finally {
    rmSync(folder, { recursive: true });
  }
}

const batch = 20;

/** Processor time on both sides, so that what else the machine does does not count; the cold fit by the clock. */
function timeFits(spec: ModelSpec, data: Reference["data"]): { coldMs: number; warmMs: number } {
  const start = performance.now();
  fitModel(spec, data);
  const coldMs = performance.now() - start;
  const time = () => {
    const before = process.cpuUsage();
    for (let turn = 0; turn < batch; turn++) fitModel(spec, data);
    const { user, system } = process.cpuUsage(before);
    return (user + system) / 1000 / batch;
  };
  for (let turn = 0; turn < 25; turn++) time();
  const times = Array.from({ length: 41 }, time).sort((left, right) => left - right);
  return { coldMs, warmMs: times[20] };
}

export function run({ json }: { json: boolean }): void {
  const reference = timeReference();
  const ours = { normal: timeFits(normal, reference.data), quasiPoisson: timeFits(quasiPoisson, reference.data) };
  const ratios = {
    normal: reference.normalMs / ours.normal.warmMs,
    quasiPoisson: reference.quasiPoissonMs / ours.quasiPoisson.warmMs,
  };
  const figures = {
    normalRatio: { value: ratios.normal, limit: required.normal, unit: "times quicker than gam" },
    quasiPoissonRatio: { value: ratios.quasiPoisson, limit: required.quasiPoisson, unit: "times quicker than gam" },
    normalMs: { value: ours.normal.warmMs, limit: reference.normalMs / required.normal, unit: "ms" },
    quasiPoissonMs: { value: ours.quasiPoisson.warmMs, limit: reference.quasiPoissonMs / required.quasiPoisson, unit: "ms" },
    normalColdMs: { value: ours.normal.coldMs, limit: null, unit: "ms" },
    quasiPoissonColdMs: { value: ours.quasiPoisson.coldMs, limit: null, unit: "ms" },
    referenceNormalMs: { value: reference.normalMs, limit: null, unit: "ms" },
    referenceQuasiPoissonMs: { value: reference.quasiPoissonMs, limit: null, unit: "ms" },
  };
  const ok = ratios.normal >= required.normal && ratios.quasiPoisson >= required.quasiPoisson;
  console.log(`Store ${store}, product ${product}, ${reference.data.price.length} rows; mgcv ${reference.mgcv}, ${reference.lapack}, ${reference.blas}`);
  for (const [name, { value, limit, unit }] of Object.entries(figures)) {
    console.log(`${name.padEnd(26)}${value.toFixed(3).padStart(10)} ${unit}${limit === null ? "" : `  (limit ${limit.toFixed(3)})`}`);
  }
  if (json) console.log(JSON.stringify({ bench: "engine", ok, figures }));
  if (!ok) process.exitCode = 1;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) run({ json: process.argv.includes("--json") });
