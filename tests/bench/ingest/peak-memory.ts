import { readFileSync } from "node:fs";
import { Problem } from "../../../infra/lib/problem.mjs";

/** The most memory that a process has had resident since it started, in MB; Linux alone tells it. */
export function peakMemoryMb(pid: number): number {
  const kilobytes = /^VmHWM:\s+(\d+) kB$/m.exec(statusOf(pid))?.[1];
  if (kilobytes === undefined) throw new Problem(`The memory of process ${pid} is not told: this bench needs Linux, and the process to run.`);
  return Number(kilobytes) / 1024;
}

function statusOf(pid: number): string {
  try {
    return readFileSync(`/proc/${pid}/status`, "utf8");
  } catch {
    return "";
  }
}
