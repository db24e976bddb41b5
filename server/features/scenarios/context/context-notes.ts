import type { BaseCell } from "@shared/contract/scenarios";
import type { SkippedStore } from "../../drivers";

/** Stores named in a sentence before it says "and n more". */
const mostNamed = 5;

type Noted = {
  base: readonly BaseCell[];
  /** Stores without a fit. */
  withoutModel: readonly string[];
  /** Why the model could not be fitted for some stores. */
  skipped: readonly SkippedStore[];
  /** Stores whose normal temperature is the mean of all weeks known. */
  roughNormals: readonly string[];
};

/** What people should know before they trust a plan on this base, in sentences. */
export function contextNotes({ base, withoutModel, skipped, roughNormals }: Noted): string[] {
  const storesWhere = (isSo: (cell: BaseCell) => boolean) => [
    ...new Set(base.filter(isSo).map(({ store }) => store)),
  ];
  const sentences: [readonly string[], (stores: string) => string][] = [
    [
      storesWhere((cell) => cell.regularPrice === null),
      (stores) => `The regular price is not known everywhere in ${stores}: those weeks are left out.`,
    ],
    [
      storesWhere((cell) => cell.unitCost === null),
      (stores) => `The unit cost is not known everywhere in ${stores}: no margin can be told.`,
    ],
    [
      roughNormals,
      (stores) => `No other year tells the normal temperature of ${stores}: the mean of all weeks known is taken.`,
    ],
  ];
  return [
    ...withoutModelNotes(withoutModel, skipped),
    ...sentences.filter(([stores]) => stores.length > 0).map(([stores, sentence]) => sentence(namedStores(stores))),
  ];
}

function withoutModelNotes(stores: readonly string[], skipped: readonly SkippedStore[]): string[] {
  if (stores.length === 0) return [];
  const count = stores.length === 1 ? "1 store has no model" : `${stores.length} stores have no model`;
  const reasons = skipped.filter(({ store }) => stores.includes(store)).slice(0, mostNamed);
  return [
    `${count}: ${listed(stores)}.`,
    ...reasons.map(({ store, reason }) => `Store ${store} could not be fitted: ${reason}`),
  ];
}

function namedStores(stores: readonly string[]): string {
  return stores.length === 1 ? `store ${stores[0]}` : `stores ${listed(stores)}`;
}

function listed(stores: readonly string[]): string {
  const more = stores.length - mostNamed;
  return more > 0 ? `${stores.slice(0, mostNamed).join(", ")} and ${more} more` : stores.join(", ");
}
