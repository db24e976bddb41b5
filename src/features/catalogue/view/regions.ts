import type { Store } from "@shared/contract/catalogue";

/** The regions of some stores by name, each once. */
export const regionsOf = (stores: readonly Store[]): string[] => [...new Set(stores.map(({ region }) => region))].sort();
