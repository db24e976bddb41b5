import { performance } from "node:perf_hooks";
import { pause } from "../../../infra/lib/command.mjs";
import type { BenchClient } from "./bench-client";

/** Milliseconds of each read, by its path. */
export type ReadTimes = ReadonlyMap<string, number[]>;

type Reading = { client: BenchClient; paths: readonly string[]; stopping: AbortSignal };

/** About as a dozen people reading at leisure. */
const breathMs = 100;

/** Reads one path after the other, over and over, until it is told to stop. */
export function readMeanwhile({ client, paths, stopping }: Reading): { stop: () => Promise<ReadTimes> } {
  const times = new Map(paths.map((path) => [path, [] as number[]]));
  let isWanted = true;
  const run = async () => {
    while (isWanted) {
      for (const [path, taken] of times) {
        const start = performance.now();
        await client.call(path);
        taken.push(performance.now() - start);
        await pause(breathMs, stopping);
      }
    }
  };
  const running = run();
  // Awaited at the end; until then a failure must not end the process.
  running.catch(() => undefined);
  return {
    async stop() {
      isWanted = false;
      await running;
      return times;
    },
  };
}

/** The value that a share of them does not exceed. */
export function quantile(values: readonly number[], share: number): number {
  const ordered = [...values].sort((one, other) => one - other);
  return ordered[Math.min(ordered.length - 1, Math.ceil(share * ordered.length) - 1)] ?? Number.NaN;
}
