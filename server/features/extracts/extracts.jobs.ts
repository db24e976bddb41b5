import type { JobDefinition } from "../../jobs/job-queue";

export const extractsJobs: readonly JobDefinition[] = [];
