import { z } from "zod";
import { defineJob, type JobDefinition } from "../../jobs/job-queue";
import { abandonCheck, checkExtract } from "./check/check-extract.service";
import { refreshCoverageJob } from "./coverage/coverage.jobs";
import { abandonLoad, loadExtract } from "./load/load-extract.service";
import { missingSalesJob } from "./notices/missing-sales.jobs";
import { abandonWithdrawal, withdrawExtract } from "./load/withdraw-extract.service";

const checkPayload = z.object({ extractId: z.uuid() });

const actedPayload = checkPayload.extend({
  actor: z.object({ personId: z.uuid(), tokenId: z.uuid().nullable(), requestId: z.string().nullable() }),
});

/** Reads a file, lists what is wrong with its rows, and makes the others ready to be loaded. */
export const checkExtractJob = defineJob({
  kind: "check-extract",
  payload: checkPayload,
  async run({ services, payload, progress }) {
    const { state, rowsRead, rowsUsable, errorCount, warningCount } = await checkExtract(services, { ...payload, progress });
    return { state, rows: { read: rowsRead, usable: rowsUsable, errors: errorCount, warnings: warningCount } };
  },
  onGivenUp: ({ services, payload, error }) => abandonCheck(services, { ...payload, error }),
});

/** Loads the usable rows of a checked file, all or none. */
export const loadExtractJob = defineJob({
  kind: "load-extract",
  /** `seen`: why it needs a second look, as the one who asked for it has seen it. */
  payload: actedPayload.extend({ seen: z.array(z.string()).default([]) }),
  run: ({ services, payload, progress }) => loadExtract(services, { ...payload, progress }),
  onGivenUp: ({ services, payload, error }) => abandonLoad(services, { ...payload, error }),
});

/** Puts back what was there before a file was loaded. */
export const withdrawExtractJob = defineJob({
  kind: "withdraw-extract",
  payload: actedPayload,
  run: ({ services, payload, progress }) => withdrawExtract(services, { ...payload, progress }),
  onGivenUp: ({ services, payload, error }) => abandonWithdrawal(services, { ...payload, error }),
});

export const extractsJobs: readonly JobDefinition[] = [checkExtractJob, loadExtractJob, withdrawExtractJob, refreshCoverageJob, missingSalesJob];
