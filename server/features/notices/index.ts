export * from "./notices.entities";
