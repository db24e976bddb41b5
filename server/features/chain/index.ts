export * from "./chain.entities";
