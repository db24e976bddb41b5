export type * from "./spec";
export type * from "./basis";
export type * from "./model";
export type * from "./results";
