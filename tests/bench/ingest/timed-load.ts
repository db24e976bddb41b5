import { performance } from "node:perf_hooks";
import type { Job } from "@shared/contract/jobs";
import type { BenchClient } from "./bench-client";

/** A part of the way from the first byte to rows that can be queried. */
export type Stage = { name: string; ms: number };

export type TimedLoad = { extractId: string; totalMs: number; stages: Stage[] };

type Wanted = { client: BenchClient; path: string; rows: number; queryPath: string };

/**
 * Uploads a sales file, asks for its load the moment it is checked, as a script at night does, and waits until its last
 * row can be read. Stages begin where the job's progress was first seen to say so.
 */
export async function timeLoad({ client, path, rows, queryPath }: Wanted): Promise<TimedLoad> {
  const { extract, firstByteAt } = await client.upload({ kind: "sales", path });
  const marks = new Marks(firstByteAt, "upload");
  marks.begin("check: waiting for the worker");
  const follow = (kind: string) => (job: Job) => {
    if (job.state !== "queued") marks.begin(`${kind}: ${stageOf(job)}`);
  };
  const check = await client.ended(extract.jobId ?? "", follow("check"));
  if ((check.result?.rows as { usable: number } | undefined)?.usable !== rows) throw new Error(`Not all rows are usable: ${JSON.stringify(check.result)}`);
  marks.begin("load: waiting for the worker");
  const { jobId } = await client.call<{ jobId: string }>(`/api/extracts/${extract.id}/load`, { method: "POST", body: { secondLook: true } });
  await client.ended(jobId, follow("load"));
  marks.begin("query");
  const { items } = await client.call<{ items: unknown[] }>(queryPath);
  if (items.length === 0) throw new Error(`${queryPath} answers no rows although the file is loaded.`);
  return { extractId: extract.id, ...marks.end() };
}

/** The job's message without its numbers. */
function stageOf({ progress: { message } }: Job): string {
  if (/Comparing them/.test(message)) return "comparing rows with each other and with what is there";
  return message === "" ? "starting" : message.replace(/:? [\d,]+/g, "").toLowerCase();
}

class Marks {
  readonly #from: number;
  #name: string;
  #since: number;
  readonly #stages: Stage[] = [];

  constructor(from: number, name: string) {
    this.#from = from;
    this.#since = from;
    this.#name = name;
  }

  begin(name: string): void {
    if (name === this.#name) return;
    const now = performance.now();
    this.#stages.push({ name: this.#name, ms: now - this.#since });
    this.#name = name;
    this.#since = now;
  }

  end(): { totalMs: number; stages: Stage[] } {
    this.begin("");
    return { totalMs: this.#since - this.#from, stages: this.#stages };
  }
}
