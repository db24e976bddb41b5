export * from "./chain.entities";
export { chainRoutes } from "./chain.routes";
export { findChain } from "./chain.repository";
export { defaultChain, ensureChain, getChain } from "./chain.service";
export { dayIn } from "./day-in";
export { hourIn } from "./hour-in";
