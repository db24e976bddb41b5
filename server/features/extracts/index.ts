export * from "./extracts.entities";
export { extractsRoutes } from "./extracts.routes";
export { extractsJobs } from "./extracts.jobs";
export { coverageRoutes } from "./coverage/coverage.routes";
export { resumeCoverage } from "./coverage/count-in-later";
export { checkExtract } from "./check/check-extract.service";
export { loadExtract } from "./load/load-extract.service";
export { withdrawExtract } from "./load/withdraw-extract.service";
export { receiveExtract, type NewExtract } from "./upload/receive-extract.service";
