import { z } from "zod";
import { idParams, idSchema, problemSchema, timestampSchema } from "./common";
import { defineEndpoint } from "./endpoint";

export const jobStateSchema = z.enum(["queued", "running", "succeeded", "failed", "cancelled"]);

export const jobSchema = z.object({
  id: idSchema,
  kind: z.string(),
  state: jobStateSchema,
  /** Units of work done and in all; total is null while it is not known. */
  progress: z.object({ done: z.number(), total: z.number().nullable(), message: z.string() }),
  /** Where the outcome can be read, for example /api/extracts/…. */
  subject: z.string().nullable(),
  result: z.record(z.string(), z.unknown()).nullable(),
  error: problemSchema.pick({ code: true, detail: true }).nullable(),
  attempt: z.number().int(),
  createdAt: timestampSchema,
  startedAt: timestampSchema.nullable(),
  finishedAt: timestampSchema.nullable(),
});
export type Job = z.infer<typeof jobSchema>;

export const getJob = defineEndpoint({
  method: "GET", path: "/api/jobs/:id", summary: "A job's state and progress", permission: "read", params: idParams, response: jobSchema,
});
export const getJobEvents = defineEndpoint({
  method: "GET", path: "/api/jobs/:id/events", summary: "The same as server-sent events until the job has ended", permission: "read",
  params: idParams, produces: "text/event-stream",
});
export const cancelJob = defineEndpoint({
  method: "POST", path: "/api/jobs/:id/cancel", summary: "Ask a job to stop", permission: "read", params: idParams, response: jobSchema,
});

/** Answer of everything that goes on in the background: 202 with `Location: /api/jobs/:id`. */
export const acceptedSchema = z.object({ jobId: idSchema });
