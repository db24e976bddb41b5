import { fellnerSchallStep, newtonSteps } from "./automatic-penalties";
import type { Design } from "./design";
import { solveDegrees } from "./fixed-degrees";
import type { PenaltySearch } from "./penalty-search";
import { createSearch, evaluateAt } from "./penalty-search";
import type { ReducedSystem } from "./reduced-system";

/** Which blocks have their penalty chosen, which are held to degrees of freedom, which are given. */
export type PenaltyPlan = {
  automatic: number[];
  fixedDegrees: { block: number; firstUnpenalised: number }[];
  given: { block: number; logPenalty: number }[];
};

/** @example planPenalties(design).automatic.length; // dimensions of the search */
export function planPenalties(design: Design): PenaltyPlan {
  const plan: PenaltyPlan = { automatic: [], fixedDegrees: [], given: [] };
  design.blocks.forEach(({ smoothness, id }, block) => {
    const firstUnpenalised = design.parts.find((part) => part.id === id)?.unpenalisedFirst ?? 0;
    if (typeof smoothness === "string") plan.automatic.push(block);
    else if ("df" in smoothness) plan.fixedDegrees.push({ block, firstUnpenalised });
    else plan.given.push({ block, logPenalty: Math.log(smoothness.penalty) });
  });
  return plan;
}

/**
 * Log penalties to start from: `logFactor` above the defaults, given ones as given.
 *
 * @example startPenalties(search, plan, 6); // the stiff start
 */
export function startPenalties(search: PenaltySearch, plan: PenaltyPlan, logFactor: number): Float64Array {
  const start = search.defaults.map((value) => value + logFactor);
  for (const { block } of plan.fixedDegrees) start[block] = search.defaults[block];
  for (const { block, logPenalty } of plan.given) start[block] = logPenalty;
  return start;
}

type RefineOptions = { start: Float64Array; fellnerSchallSteps: number; maxSteps: number; stopNear?: Float64Array };

/**
 * Chooses penalties for one working model from one start: Fellner-Schall steps, then Newton; degrees of freedom asked for
 * are solved in turn with it until neither moves.
 *
 * @returns whether the search came to rest; the result is `search.current`.
 * @example refinePenalties(search, reduced, plan, { start, fellnerSchallSteps: 2, maxSteps: 50 });
 */
export function refinePenalties(search: PenaltySearch, reduced: ReducedSystem, plan: PenaltyPlan, options: RefineOptions): boolean {
  evaluateAt(search, reduced, options.start);
  liftUntilRegular(search, reduced, options.start);
  const { automatic, fixedDegrees } = plan;
  if (fixedDegrees.length > 0) solveDegrees(search, reduced, fixedDegrees);
  if (automatic.length === 0) return true;
  for (let step = 0; step < options.fellnerSchallSteps; step++) fellnerSchallStep(search, reduced, automatic);
  if (fixedDegrees.length === 0) return newtonSteps(search, reduced, automatic, options);
  for (let turn = 0; turn < 60; turn++) {
    const before = search.current.logPenalties.slice();
    solveDegrees(search, reduced, fixedDegrees);
    const rested = newtonSteps(search, reduced, automatic, options);
    const moved = search.current.logPenalties.some((value, block) => Math.abs(value - before[block]) > 1e-8);
    if (rested && !moved) return true;
  }
  return false;
}

/** Where rounding makes the system singular at a small penalty, raises all of them until it is not. */
function liftUntilRegular(search: PenaltySearch, reduced: ReducedSystem, start: Float64Array): void {
  const lifted = start.slice();
  for (let step = 0; step < 40 && !Number.isFinite(search.current.criterion); step++) {
    for (let block = 0; block < lifted.length; block++) lifted[block] += 2;
    evaluateAt(search, reduced, lifted);
  }
}

/**
 * Chooses penalties for one working model from two starts, stiff (e^6 times the default) and loose (e^-6): about one
 * series in nine has several optima, and the better criterion wins.
 *
 * @returns the search at its result, and whether it came to rest.
 * @example const { search } = bestPenalties(reduced, design.blocks, plan);
 */
export function bestPenalties(
  reduced: ReducedSystem, design: Design, plan: PenaltyPlan,
): { search: PenaltySearch; rested: boolean } {
  const search = createSearch(reduced, design.blocks);
  const options = { fellnerSchallSteps: 2, maxSteps: 60 };
  const stiffRested = refinePenalties(search, reduced, plan, { ...options, start: startPenalties(search, plan, 6) });
  if (plan.automatic.length === 0) return { search, rested: stiffRested };
  const stiff = search.current.logPenalties.slice();
  const stiffCriterion = search.current.criterion;
  const looseRested = refinePenalties(search, reduced, plan, { ...options, start: startPenalties(search, plan, -6), stopNear: stiff });
  if (search.current.criterion < stiffCriterion - 1e-9 * Math.abs(stiffCriterion)) return { search, rested: looseRested };
  evaluateAt(search, reduced, stiff);
  return { search, rested: stiffRested };
}
