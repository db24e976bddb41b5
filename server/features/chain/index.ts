export * from "./chain.entities";
export { chainRoutes } from "./chain.routes";
export { defaultChain, ensureChain, getChain } from "./chain.service";
export { dayIn } from "./day-in";
