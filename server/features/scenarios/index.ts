export * from "./scenarios.entities";
export { createScenario } from "./scenarios.service";
export { scenariosRoutes } from "./scenarios.routes";
