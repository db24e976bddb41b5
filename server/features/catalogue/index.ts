export * from "./catalogue.entities";
export { catalogueRoutes } from "./catalogue.routes";
