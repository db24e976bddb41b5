import { driversJobs } from "./features/drivers";
import { extractsJobs } from "./features/extracts";
import type { JobDefinition } from "./jobs/job-queue";
import { mailJobs } from "./mail";

/** Every kind of job a worker runs. */
export const jobDefinitions: readonly JobDefinition[] = [...extractsJobs, ...driversJobs, ...mailJobs];
