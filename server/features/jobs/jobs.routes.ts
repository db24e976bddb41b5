import * as contract from "@shared/contract/jobs";
import { route, type Route } from "../../http/route";
import { presentJob } from "./jobs.presenter";
import { getJob } from "./jobs.service";

const readJob = route(contract.getJob, async ({ params, em }) => presentJob(await getJob(em, params.id)));

export const jobsRoutes: readonly Route[] = [readJob];
