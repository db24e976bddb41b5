export * from "./scenarios.entities";
