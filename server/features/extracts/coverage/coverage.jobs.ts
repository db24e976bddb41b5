import { z } from "zod";
import { defineJob } from "../../../jobs/job-queue";
import { refreshCoverage } from "./refresh-coverage.service";

/**
 * Counts what is loaded of each store and week. Each load and withdrawal asks for a job of its own, since one that commits
 * while an earlier job ends must not be left to that job; a job that finds nothing to do is done at once.
 */
export const refreshCoverageJob = defineJob({
  kind: "refresh-coverage",
  payload: z.object({}),
  run: async ({ services, progress }) => ({ extracts: await refreshCoverage(services, { progress }) }),
});
