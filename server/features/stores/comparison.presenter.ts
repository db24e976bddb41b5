import type { Comparison } from "@shared/contract/comparisons";
import { presentCurve } from "../drivers";
import type { ComparedStore, ComparisonOutcome } from "./comparison.service";

/** A comparison as the contract has it. */
export function presentComparison({ stores, chain, ...rest }: ComparisonOutcome): Comparison {
  return { ...rest, stores: stores.map(presentStore), chain };
}

function presentStore({ store, learnt, reason }: ComparedStore): Comparison["stores"][number] {
  const elasticity = learnt?.elasticity ?? null;
  return {
    store: store.code,
    name: store.name,
    region: store.region,
    meanWeeklyUnits: store.meanWeeklyUnits,
    curve: learnt ? presentCurve(learnt.curve) : null,
    reason,
    elasticity: elasticity && { estimate: elasticity.estimate, lower: elasticity.lower, upper: elasticity.upper },
  };
}
