export * from "./accounts.entities";
export { accountsRoutes } from "./accounts.routes";
