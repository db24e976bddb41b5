export * from "./chain.entities";
export { chainRoutes } from "./chain.routes";
