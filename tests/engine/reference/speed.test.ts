import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import type { MeasuredWork } from "../../bench/engine/measure-work";

/**
 * The engine's bench on four of its works, in a process of its own, as it is run by hand. Held to half of each ratio, since a
 * busy machine does not slow both sides alike; `npm run bench -- engine` asks for the whole.
 */
const project = fileURLToPath(new URL("../../../", import.meta.url));
const names = ["normal", "quasiPoisson", "stores", "everything"];

function runBench(): { works: MeasuredWork[]; figures: Record<string, { value: number; limit: number | null }> } {
  const args = ["--import", "tsx", "tests/bench/engine.ts", "--json", "--only", names.join(",")];
  try {
    return lastLine(execFileSync(process.execPath, args, { cwd: project, encoding: "utf8", stdio: ["ignore", "pipe", "inherit"] }));
  } catch (error) {
    // It ends with 1 where a whole ratio is missed.
    if (error instanceof Error && "stdout" in error && String(error.stdout) !== "") return lastLine(String(error.stdout));
    throw error;
  }
}

const lastLine = (text: string) => JSON.parse(text.trim().split("\n").at(-1) ?? "") as ReturnType<typeof runBench>;

describe("Fits are quicker than the reference package's on the same rows", () => {
  const { works, figures } = runBench();

  it.each(names)("by at least half the ratio asked for: %s", (name) => {
    const work = works.find((one) => one.work === name);
    expect(work?.ratio).toBeGreaterThanOrEqual((work?.requiredRatio ?? Number.NaN) / 2);
  });

  it("and all 106,139 rows take no more than 200 MB over the rows themselves", () => {
    expect(figures.everythingMemoryMb.value).toBeLessThanOrEqual(200);
  });
});
