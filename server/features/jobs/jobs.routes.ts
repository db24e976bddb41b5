import * as contract from "@shared/contract/jobs";
import { route, type Route } from "../../http/route";
import { streamJob } from "./job-events";
import { presentJob } from "./jobs.presenter";
import { cancelJob, getJob } from "./jobs.service";

const readJob = route(contract.getJob, async ({ params, em }) => presentJob(await getJob(em, params.id)));

const watchJob = route(contract.getJobEvents, async ({ params, em, services, request, response }) => {
  const job = await getJob(em, params.id);
  await streamJob({ jobId: job.id, services, request, response });
  return undefined;
});

const stopJob = route(contract.cancelJob, async ({ params, em, caller, requestId }) => {
  return presentJob(await cancelJob(em, params.id, { caller, requestId }));
});

export const jobsRoutes: readonly Route[] = [readJob, watchJob, stopJob];
