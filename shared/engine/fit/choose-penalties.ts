import { fellnerSchallStep, newtonSteps } from "./automatic-penalties";
import type { NewtonOptions, SearchEnd } from "./automatic-penalties";
import type { Design } from "./design";
import type { AskedTerm } from "./fixed-degrees";
import { solveDegrees } from "./fixed-degrees";
import type { PenaltySearch } from "./penalty-search";
import { evaluateAt, exchangeKept } from "./penalty-search";

/** Which penalties are chosen, which terms are held to degrees of freedom, which penalties are given. */
export type PenaltyPlan = {
  automatic: number[];
  asked: AskedTerm[];
  given: { penalty: number; logPenalty: number }[];
};

/** @example planPenalties(design).automatic.length; // dimensions of the search */
export function planPenalties(design: Design): PenaltyPlan {
  const plan: PenaltyPlan = { automatic: [], asked: [], given: [] };
  design.penalties.forEach(({ smoothness, id }, penalty) => {
    if (typeof smoothness === "string") plan.automatic.push(penalty);
    else if ("penalty" in smoothness) plan.given.push({ penalty, logPenalty: Math.log(smoothness.penalty) });
    else {
      const known = plan.asked.find((term) => term.id === id);
      if (known !== undefined) known.penalties.push(penalty);
      else plan.asked.push(askedTerm(design, { id, penalty, asked: smoothness.df }));
    }
  });
  return plan;
}

function askedTerm(design: Design, of: { id: string; penalty: number; asked: number }): AskedTerm {
  const part = design.parts.find(({ id }) => id === of.id);
  return {
    id: of.id, penalties: [of.penalty], asked: of.asked,
    firstUnpenalised: part?.unpenalisedFirst ?? 0,
    unpenalised: part?.coordinates.unpenalised ?? 0,
  };
}

/**
 * Log penalties to start from: `logFactor` above the defaults, given ones as given.
 *
 * @example startPenalties(search, plan, 6); // the stiff start
 */
export function startPenalties(search: PenaltySearch, plan: PenaltyPlan, logFactor: number): Float64Array {
  const start = search.defaults.map((value) => value + logFactor);
  for (const { penalties } of plan.asked) for (const penalty of penalties) start[penalty] = search.defaults[penalty];
  for (const { penalty, logPenalty } of plan.given) start[penalty] = logPenalty;
  return start;
}

export type RefineOptions = NewtonOptions & { start: Float64Array; fellnerSchallSteps: number };

/**
 * Chooses penalties for one working model from one start: Fellner-Schall steps, then Newton; degrees of freedom asked for
 * are solved in turn with it until neither moves.
 *
 * @returns how the search ended; the result is `search.current`.
 * @example refinePenalties(search, plan, { start, fellnerSchallSteps: 2, maxSteps: 50 });
 */
export function refinePenalties(search: PenaltySearch, plan: PenaltyPlan, options: RefineOptions): SearchEnd {
  evaluateAt(search, options.start);
  liftUntilRegular(search, plan, options.start);
  const { automatic, asked } = plan;
  if (asked.length > 0) solveDegrees(search, asked);
  if (automatic.length === 0) return "rested";
  for (let step = 0; step < options.fellnerSchallSteps; step++) fellnerSchallStep(search, automatic);
  if (asked.length === 0) return newtonSteps(search, automatic, options);
  for (let turn = 0; turn < options.maxSteps; turn++) {
    const before = search.current.logPenalties.slice();
    solveDegrees(search, asked);
    const end = newtonSteps(search, automatic, options);
    const moved = search.current.logPenalties.some((value, penalty) => Math.abs(value - before[penalty]) > 1e-8);
    if (end !== "unfinished" && !moved) return end;
  }
  return "unfinished";
}

/** Log units beyond the highest penalty to which one is raised where nothing else makes the system regular. */
const lastResort = 30;

/**
 * Where rounding makes the system singular at a small penalty, raises those that are chosen until it is not; else all, and
 * at last beyond what a search would choose.
 */
function liftUntilRegular(search: PenaltySearch, plan: PenaltyPlan, start: Float64Array): void {
  const lifted = start.slice();
  const all = Array.from(lifted.keys());
  const given = new Set(plan.given.map(({ penalty }) => penalty));
  const stages = [{ penalties: all.filter((penalty) => !given.has(penalty)), beyond: 0 }, { penalties: all, beyond: 0 }, { penalties: all, beyond: lastResort }];
  for (const { penalties, beyond } of stages) {
    for (let step = 0; step < 40 && penalties.length > 0 && !Number.isFinite(search.current.criterion); step++) {
      for (const penalty of penalties) {
        lifted[penalty] = Math.max(lifted[penalty], Math.min(lifted[penalty] + 2, search.highest[penalty] + beyond));
      }
      evaluateAt(search, lifted);
    }
  }
}

/**
 * Chooses penalties for one working model from two starts, stiff (e^6 times the default) and loose (e^-6): about one
 * series in nine has several optima, and the better criterion wins. Where a penalty went to its limit, it is let go from
 * its default once more: an optimum between may be hidden from both.
 *
 * @returns whether it came to rest; the result is `search.current`.
 * @example const rested = bestPenalties(search, plan);
 */
export function bestPenalties(search: PenaltySearch, plan: PenaltyPlan): boolean {
  let rested = refinePenalties(search, plan, { fellnerSchallSteps: sureSteps, maxSteps, start: startPenalties(search, plan, 6) }) === "rested";
  if (plan.automatic.length === 0) return rested;
  const loose = startPenalties(search, plan, -6);
  rested = betterOf(search, plan, { start: loose, fellnerSchallSteps: sureSteps, maxSteps }, rested);
  const freed = freedPenalties(search, plan);
  return freed === null ? rested : betterOf(search, plan, { start: freed, fellnerSchallSteps: 0, maxSteps }, rested);
}

/** Fellner-Schall steps from one start where the equations are final: the first shows the direction, more are slower than Newton's. */
const sureSteps = 1;
/** Newton steps allowed from one start. */
export const maxSteps = 60;

/** Searches from another start, and goes back to the optimum known already unless the new one's criterion is lower. */
function betterOf(search: PenaltySearch, plan: PenaltyPlan, options: RefineOptions, knownRested: boolean): boolean {
  const { logPenalties, criterion } = search.current;
  exchangeKept(search);
  const end = refinePenalties(search, plan, { ...options, known: { logPenalties, criterion } });
  if (search.current.criterion < criterion - 1e-9 * Math.abs(criterion)) return end !== "unfinished";
  exchangeKept(search);
  return knownRested;
}

/**
 * Log penalties as they are, but those at their limit back at the default; null where none is.
 *
 * @example freedPenalties(search, plan); // a third start
 */
export function freedPenalties(search: PenaltySearch, plan: PenaltyPlan): Float64Array | null {
  const { logPenalties } = search.current;
  const atLimit = plan.automatic.filter((penalty) => isLimit(search, penalty, logPenalties[penalty]));
  if (atLimit.length === 0) return null;
  const freed = logPenalties.slice();
  for (const penalty of atLimit) freed[penalty] = search.defaults[penalty];
  return freed;
}

/** Log units below the highest penalty from which a curve is the penalty's straight line for all purposes. */
const limitMargin = 4;

/** Whether a log penalty is as good as its limit. */
export const isLimit = (search: PenaltySearch, penalty: number, logPenalty: number): boolean =>
  logPenalty >= search.highest[penalty] - limitMargin;
