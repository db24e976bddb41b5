import type { FittedTerm } from "../../engine";
import { driverOfTerm } from "../driver";
import type { Driver } from "../driver";
import type { StoreModel } from "../scenario/scenario";

/** A selected store, its model and the base units that weigh its curve. */
export type LaneStore = StoreModel & { baseUnits: number };

/** A store whose model has a term for the lane's driver. */
export type LaneMember = LaneStore & { term: FittedTerm };

/**
 * The stores whose models have a term of a driver, and those whose models do not (the driver never varied there).
 *
 * @example membersOf(stores, "price").without // ["S7"]
 */
export function membersOf(stores: readonly LaneStore[], driver: Driver): { members: LaneMember[]; without: string[] } {
  const members: LaneMember[] = [];
  const without: string[] = [];
  for (const store of stores) {
    const term = store.model.terms.find((candidate) => driverOfTerm(candidate) === driver);
    if (term === undefined) without.push(store.store);
    else members.push({ ...store, term });
  }
  return { members, without };
}
