export { storesRoutes } from "./stores.routes";
