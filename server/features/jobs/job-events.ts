import type { Request, Response } from "express";
import { ProblemError } from "../../errors";
import type { Services } from "../../services";
import { watchOf } from "./job-watch";
import type { JobRow } from "./jobs.entities";
import { presentJob } from "./jobs.presenter";

/** A comment this often keeps proxies from closing a quiet stream. */
const heartbeatEveryMs = 15_000;
/** After this the browser connects again, and shows again that it may. */
const longestMs = 30 * 60_000;

type Stream = { jobId: string; services: Services; request: Request; response: Response };

/**
 * Answers a job's progress as server-sent events: one message with the whole job at first and after each change, until
 * it has ended. Resolves when the stream is over, whoever closed it.
 *
 * @throws ProblemError 503 where too many streams are open.
 */
export function streamJob({ jobId, services, request, response }: Stream): Promise<void> {
  const watch = watchOf(services);
  if (watch.isFull) {
    const detail = "Too many people follow jobs right now. Ask for the job itself every few seconds instead.";
    throw new ProblemError({ status: 503, code: "too-many-streams", detail, headers: { "Retry-After": "10" } });
  }
  response.status(200).set({
    "Content-Type": "text/event-stream; charset=utf-8",
    "Cache-Control": "no-cache, no-transform",
    // Proxies that buffer answers would hold the events back.
    "X-Accel-Buffering": "no",
  });
  response.write("retry: 1000\n\n");
  return new Promise((resolve) => {
    const { signal } = services.stopping;
    const heartbeat = setInterval(() => response.write(": still here\n\n"), heartbeatEveryMs);
    const limit = setTimeout(end, longestMs);
    let last = "";
    const unwatch = watch.watch(jobId, tell);
    request.once("close", end);
    response.once("close", end);
    signal.addEventListener("abort", end, { once: true });
    if (signal.aborted) end();

    function tell(job: JobRow | undefined) {
      if (!job) return end();
      const text = JSON.stringify(presentJob(job));
      if (text !== last) response.write(`data: ${text}\n\n`);
      last = text;
      if (job.finishedAt) end();
    }

    function end() {
      clearInterval(heartbeat);
      clearTimeout(limit);
      unwatch();
      signal.removeEventListener("abort", end);
      if (!response.writableEnded) response.end();
      resolve();
    }
  });
}
