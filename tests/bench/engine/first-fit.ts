import { execFileSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import { performance } from "node:perf_hooks";
import { fileURLToPath } from "node:url";
import { fitModel } from "@shared/engine";
import { readRows } from "./rows";
import { works } from "./works";

/**
 * The first fit of a process: `node --expose-gc --import tsx first-fit.ts FOLDER WORK` prints it as JSON.
 * Time by the clock, compiling included; memory is the highest resident size of the process during the fit, less what it had
 * with the rows in hand.
 */
export type FirstFit = { coldMs: number; memoryMb: number };

export function measureFirstFit({ folder, work }: { folder: string; work: string }): FirstFit {
  const file = fileURLToPath(import.meta.url);
  const args = ["--expose-gc", "--import", "tsx", file, folder, work];
  return JSON.parse(execFileSync(process.execPath, args, { encoding: "utf8", stdio: ["ignore", "pipe", "inherit"] })) as FirstFit;
}

function firstFit(folder: string, name: string): FirstFit {
  const work = works.find((one) => one.name === name);
  if (!work) throw new Error(`There is no work "${name}".`);
  const sets = work.rowsOf(readRows(folder));
  globalThis.gc?.();
  // Linux starts the highest resident size anew when 5 is written here.
  writeFileSync("/proc/self/clear_refs", "5");
  const held = statusMb("VmRSS");
  const start = performance.now();
  for (const rows of sets) fitModel(work.spec, rows);
  const coldMs = (performance.now() - start) / sets.length;
  return { coldMs, memoryMb: statusMb("VmHWM") - held };
}

function statusMb(field: "VmRSS" | "VmHWM"): number {
  const line = readFileSync("/proc/self/status", "utf8").split("\n").find((one) => one.startsWith(`${field}:`));
  return Number(line?.match(/\d+/)?.[0]) / 1024;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) console.log(JSON.stringify(firstFit(process.argv[2], process.argv[3])));
