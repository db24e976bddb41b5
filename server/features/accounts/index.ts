export * from "./accounts.entities";
