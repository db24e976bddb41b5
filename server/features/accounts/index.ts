export * from "./accounts.entities";
export { accountsRoutes } from "./accounts.routes";
export { audit, type AuditedAct } from "./audit";
export { createPerson, personName, type NewPerson } from "./people.service";
export { callerOfSession, sessions } from "./sessions";
export { callerByToken } from "./tokens";
