import * as contract from "@shared/contract/coverage";
import { route, type Route } from "../../../http/route";
import { presentCoverage } from "./coverage.presenter";
import { readCoverage } from "./coverage.service";

const read = route(contract.getCoverage, async ({ em, query, now }) => presentCoverage(await readCoverage(em, { ...query, now })));

export const coverageRoutes: readonly Route[] = [read];
