export * from "./chain.entities";
export { calendarOf } from "./calendar-of";
export { chainRoutes } from "./chain.routes";
export { findChain } from "./chain.repository";
export { defaultChain, ensureChain, getChain } from "./chain.service";
export { dayIn } from "./day-in";
export { hourIn } from "./hour-in";
