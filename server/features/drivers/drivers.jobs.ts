import type { JobDefinition } from "../../jobs/job-queue";

export const driversJobs: readonly JobDefinition[] = [];
