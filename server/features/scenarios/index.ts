export * from "./scenarios.entities";
export { scenariosRoutes } from "./scenarios.routes";
