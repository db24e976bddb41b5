export * from "./drivers.entities";
export { driversRoutes } from "./drivers.routes";
export { driversJobs } from "./drivers.jobs";
