import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import { PersonEntity } from "../accounts";

export type JobState = "queued" | "running" | "succeeded" | "failed" | "cancelled";

/** What people see of a job; the queue itself keeps its own tables. */
export const JobEntity = defineEntity({
  name: "Job",
  tableName: "jobs",
  indexes: [{ properties: ["state", "createdAt"] }, { properties: ["subject"] }, { properties: ["singletonKey"] }],
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    kind: p.string().length(60),
    state: p.string().length(12).$type<JobState>().default("queued"),
    payload: p.json<Record<string, unknown>>(),
    done: p.double().$type<number>().default(0),
    total: p.double().$type<number>().nullable(),
    message: p.string().length(200).default(""),
    /** Path where the outcome can be read. */
    subject: p.string().length(120).nullable(),
    result: p.json<Record<string, unknown>>().nullable(),
    error: p.json<{ code: string; detail: string }>().nullable(),
    /** Goes up each time a worker takes it; a worker whose number is no longer the row's has lost the job. */
    attempt: p.smallint().default(0),
    /** Runs that broke down or were lost with their worker; handing on at a stop is none. */
    failures: p.smallint().default(0),
    /** It ended without success, and its subject has not been put right yet. */
    cleanupPending: p.boolean().default(false),
    /** A running job without a fresh sign of life is given to another worker. */
    heartbeatAt: p.datetime().nullable(),
    /** At most one job with this key waits or runs at a time. */
    singletonKey: p.string().length(120).nullable(),
    cancelRequested: p.boolean().default(false),
    createdBy: () => p.manyToOne(PersonEntity).nullable(),
    createdAt: p.datetime().onCreate(() => new Date()),
    startedAt: p.datetime().nullable(),
    finishedAt: p.datetime().nullable(),
  },
});
export type JobRow = InferEntity<typeof JobEntity>;
