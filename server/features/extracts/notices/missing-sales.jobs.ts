import { z } from "zod";
import { defineJob } from "../../../jobs/job-queue";
import { tellOfMissing } from "./missing-sales.service";

/** Tells the data admins that the sales of the week that ended last are missing. */
export const missingSalesJob = defineJob({
  kind: "missing-sales",
  payload: z.object({}),
  run: async ({ services }) => ({ told: await tellOfMissing(services) }),
});
