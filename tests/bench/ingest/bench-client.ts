import { createReadStream, statSync } from "node:fs";
import { Agent, request, type ClientRequest, type IncomingMessage } from "node:http";
import { text } from "node:stream/consumers";
import { performance } from "node:perf_hooks";
import { pause } from "../../../infra/lib/command.mjs";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import type { Job } from "@shared/contract/jobs";

type Options = { url: string; token: string; stopping: AbortSignal };
type Sent = { method?: string; body?: object };
type Request = { path: string; method: string; headers: Record<string, string>; write: (sending: ClientRequest) => void };
export type Upload = { kind: ExtractKind } & ({ path: string } | { content: string });

const boundary = "bench-boundary";
const pollEveryMs = 100;

/** Calls the HTTP interface as a script does: with a token, over connections that stay open. */
export class BenchClient {
  readonly #options: Options;
  readonly #agent = new Agent({ keepAlive: true });

  constructor(options: Options) {
    this.#options = options;
  }

  /** The answer's JSON. @throws Error for any answer that is no success. */
  async call<Answer>(path: string, { method = "GET", body }: Sent = {}): Promise<Answer> {
    const payload = body && JSON.stringify(body);
    const headers: Record<string, string> = payload ? { "Content-Type": "application/json", "Content-Length": String(Buffer.byteLength(payload)) } : {};
    return JSON.parse(await this.#send({ path, method, headers, write: (sending) => void sending.end(payload) })) as Answer;
  }

  /** Sends a file; `firstByteAt` is when the request began. */
  async upload(file: Upload): Promise<{ extract: Extract; firstByteAt: number }> {
    const part = (name: string) => `--${boundary}\r\nContent-Disposition: form-data; name="${name}"`;
    const before = `${part("kind")}\r\n\r\n${file.kind}\r\n${part("file")}; filename="${file.kind}.csv"\r\nContent-Type: text/csv\r\n\r\n`;
    const after = `\r\n--${boundary}--\r\n`;
    const size = "path" in file ? statSync(file.path).size : Buffer.byteLength(file.content);
    const headers = { "Content-Type": `multipart/form-data; boundary=${boundary}`, "Content-Length": String(before.length + size + after.length) };
    const firstByteAt = performance.now();
    const answer = await this.#send({
      path: "/api/extracts", method: "POST", headers,
      write: (sending) => {
        sending.write(before);
        if ("content" in file) return void sending.end(file.content + after);
        createReadStream(file.path, { highWaterMark: 256 * 1024 }).on("end", () => sending.end(after)).pipe(sending, { end: false });
      },
    });
    return { extract: JSON.parse(answer) as Extract, firstByteAt };
  }

  /** Waits for a job's end. @throws Error where it did not succeed. */
  async ended(jobId: string, onSeen: (job: Job) => void = () => undefined): Promise<Job> {
    for (;;) {
      const job = await this.call<Job>(`/api/jobs/${jobId}`);
      onSeen(job);
      if (job.state === "succeeded") return job;
      if (job.finishedAt !== null) throw new Error(`The job ${job.kind} is ${job.state}: ${job.error?.detail}`);
      await pause(pollEveryMs, this.#options.stopping);
    }
  }

  /** Uploads a file, and loads it as soon as it is checked. */
  async load(file: Upload): Promise<void> {
    const { extract } = await this.upload(file);
    await this.ended(extract.jobId ?? "");
    const { jobId } = await this.call<{ jobId: string }>(`/api/extracts/${extract.id}/load`, { method: "POST", body: { secondLook: true } });
    await this.ended(jobId);
  }

  close(): void {
    this.#agent.destroy();
  }

  async #send({ path, method, headers, write }: Request): Promise<string> {
    const { url, token, stopping } = this.#options;
    const response = await new Promise<IncomingMessage>((resolve, reject) => {
      const sending = request(`${url}${path}`, { method, agent: this.#agent, signal: stopping, headers: { Authorization: `Bearer ${token}`, ...headers } });
      sending.once("response", resolve).once("error", reject);
      write(sending);
    });
    const answer = await text(response);
    if ((response.statusCode ?? 500) < 300) return answer;
    throw new Error(`${method} ${path} was answered ${response.statusCode}: ${answer.slice(0, 300)}`);
  }
}
