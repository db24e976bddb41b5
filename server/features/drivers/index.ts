export * from "./drivers.entities";
