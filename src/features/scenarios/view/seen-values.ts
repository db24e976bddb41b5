import type { LaneStore } from "@shared/planning";
import { driverOfTerm } from "@shared/planning";

/** Ticks of a rug beyond this many lie on one another. */
const mostTicks = 400;

/** Every value the stores' models learnt a driver from, once each, thinned where there are very many. */
export function seenValues(stores: readonly LaneStore[], driver: string): number[] {
  const values = new Set<number>();
  for (const { model } of stores) {
    const term = model.terms.find((candidate) => driverOfTerm(candidate) === driver);
    for (const value of term?.seen.values ?? []) if (typeof value === "number") values.add(value);
  }
  const sorted = [...values].sort((one, other) => one - other);
  const every = Math.ceil(sorted.length / mostTicks);
  return every <= 1 ? sorted : sorted.filter((_, index) => index % every === 0);
}
