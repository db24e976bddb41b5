export * from "./notices.entities";
export { noticesRoutes } from "./notices.routes";
export { wasSent } from "./notices.repository";
export { salesDue, type SalesDue } from "./sales-due";
export { addressOf, sendNotice, type Letter } from "./send-notice";
