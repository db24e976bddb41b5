import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { ensureR } from "../../infra/lib/r-packages.mjs";
import { measureWork, type MeasuredWork } from "./engine/measure-work";
import { timeReference, type Reference } from "./engine/reference";
import { readRows } from "./engine/rows";
import { works } from "./engine/works";
import { growthLines, measureGrowth } from "./engine/growth";
import { saveGrowthPicture } from "./engine/growth-picture";

/**
 * Times this engine and R's mgcv on the same rows in one run: warm medians of processor time on both sides, our first fit by
 * the clock, and the memory of the largest fit. Then shows how our time grows.
 * `npm run bench -- engine [--json] [--only WORK,WORK]`: with --only, those works alone and no growth.
 */
type Figure = { value: number; limit: number | null; unit: string };

const memoryLimitMb = 200;

function measure(names: readonly string[]): { reference: Reference; measured: MeasuredWork[] } {
  const folder = mkdtempSync(join(tmpdir(), "engine-bench-"));
  try {
    const reference = timeReference({ folder, works: names });
    const rows = readRows(folder);
    const chosen = works.filter(({ name }) => names.includes(name));
    return { reference, measured: chosen.map((work) => measureWork(work, { rows, folder, reference: reference.works[work.name] })) };
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function figuresOf(measured: readonly MeasuredWork[]): Record<string, Figure> {
  const figures: Record<string, Figure> = {};
  for (const { work, ratio, requiredRatio, oursMs, coldMs, referenceMs, memoryMb } of measured) {
    figures[`${work}Ratio`] = { value: ratio, limit: requiredRatio, unit: "times quicker than mgcv" };
    figures[`${work}Ms`] = { value: oursMs, limit: referenceMs / requiredRatio, unit: "ms" };
    figures[`${work}ColdMs`] = { value: coldMs, limit: null, unit: "ms" };
    figures[`${work}ReferenceMs`] = { value: referenceMs, limit: null, unit: "ms" };
    if (work === "everything") figures.everythingMemoryMb = { value: memoryMb, limit: memoryLimitMb, unit: "MB" };
  }
  return figures;
}

function print(measured: readonly MeasuredWork[]): void {
  const line = (cells: string[]) => console.log(cells[0].padEnd(50) + cells.slice(1).map((cell) => cell.padStart(11)).join(""));
  line(["per model", "rows", "ours ms", "cold ms", "mgcv ms", "ratio", "required", "fitted gap", "edf gap", "memory MB"]);
  for (const { title, rows, models, oursMs, coldMs, referenceMs, ratio, requiredRatio, largestDifferences, memoryMb } of measured) {
    line([
      title, String(Math.round(rows / models)), oursMs.toFixed(3), coldMs.toFixed(1), referenceMs.toFixed(1), `1/${ratio.toFixed(0)}`,
      `1/${requiredRatio}`, largestDifferences.fitted.toExponential(1), largestDifferences.edf.toExponential(1), memoryMb.toFixed(0),
    ]);
  }
  console.log("Gaps are to the call that is timed, in standard deviations. Three of the calls are no yardstick of agreement: gam's REML of");
  console.log("quasi-Poisson is another criterion, \"fs\" splits level and slope otherwise, discrete = TRUE rounds. For that: npm run test:reference.");
}

const option = process.argv.indexOf("--only");
const only = option < 0 ? null : (process.argv[option + 1] ?? "").split(",");
const unknown = only?.filter((name) => !works.some((work) => work.name === name)) ?? [];
if (unknown.length > 0) throw new Error(`There is no work ${unknown.join(", ")}: choose among ${works.map(({ name }) => name).join(", ")}.`);

await ensureR({ say: (text: string) => console.error(text), stopping: new AbortController().signal });
const { reference: { madeWith, blas }, measured } = measure(only ?? works.map(({ name }) => name));
console.log(`mgcv ${madeWith.packages.mgcv}, R ${madeWith.r}, ${madeWith.lapack}, ${blas}; Node.js ${process.versions.node}`);
print(measured);

const growth = only ? [] : measureGrowth();
if (!only) {
  growthLines(growth).forEach((line) => console.log(line));
  saveGrowthPicture(growth);
}

const figures = figuresOf(measured);
const isOk = measured.every(({ ratio, requiredRatio }) => ratio >= requiredRatio)
  && (figures.everythingMemoryMb?.value ?? 0) <= memoryLimitMb;
if (process.argv.includes("--json")) console.log(JSON.stringify({ bench: "engine", ok: isOk, figures, works: measured, growth }));
process.exitCode = isOk ? 0 : 1;
