export * as accounts from "./accounts";
export * as catalogue from "./catalogue";
export * as chain from "./chain";
export * as comparisons from "./comparisons";
export * as drivers from "./drivers";
export * as extracts from "./extracts";
export * as jobs from "./jobs";
export * as scenarios from "./scenarios";
