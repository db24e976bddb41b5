export * from "./jobs.entities";
export { jobsRoutes } from "./jobs.routes";
