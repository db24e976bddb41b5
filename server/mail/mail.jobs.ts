import type { JobDefinition } from "../jobs/job-queue";

export const mailJobs: readonly JobDefinition[] = [];
