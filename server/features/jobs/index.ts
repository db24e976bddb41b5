export * from "./jobs.entities";
