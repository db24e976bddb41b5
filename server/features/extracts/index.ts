export * from "./extracts.entities";
export { extractsRoutes } from "./extracts.routes";
export { extractsJobs } from "./extracts.jobs";
