export * from "./catalogue.entities";
