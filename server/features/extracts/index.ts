export * from "./extracts.entities";
