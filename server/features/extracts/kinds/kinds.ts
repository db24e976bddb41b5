import type { ExtractKind } from "@shared/contract/extract-kinds";
import { eventsKind } from "./events";
import type { KindDefinition } from "./kind";
import { fundingKind } from "./funding";
import { listingsKind } from "./listings";
import { productsKind } from "./products";
import { salesKind } from "./sales";
import { storesKind } from "./stores";
import { temperaturesKind } from "./temperatures";

/** Every kind of file, by name. */
export const kinds: Record<ExtractKind, KindDefinition> = {
  sales: salesKind,
  stores: storesKind,
  products: productsKind,
  listings: listingsKind,
  funding: fundingKind,
  events: eventsKind,
  temperatures: temperaturesKind,
};
