import { createArrowState } from "./arrow-system";
import type { LikelihoodState } from "./likelihood-state";
import { createState } from "./likelihood-state";
import type { Penalty } from "./penalties";
import { weightAt } from "./penalties";
import type { LikelihoodProblem, PenalisedSystem } from "./restricted-likelihood";
import { differentiate, evaluateLikelihood } from "./restricted-likelihood";

/** How far, in log units, a penalty may go from its default before it is frozen there: a straight line, or no penalty. */
const upwards = 16;
const downwards = 27;
/** A block the unpenalised columns all but reproduce keeps rounding only; penalties are not let near that. */
const ownShareOfDefault = 1e-8;
const ownShareOfLowest = 1e-12;

/** The penalties of one model while they are searched for; holds three states, so that a trial can be refused and a result kept. */
export type PenaltySearch = {
  problem: LikelihoodProblem;
  penalties: readonly Penalty[];
  /** Mean diagonal of each penalty's part of X'WX: a penalty of this size halves. */
  defaults: Float64Array;
  lowest: Float64Array;
  highest: Float64Array;
  current: LikelihoodState;
  trial: LikelihoodState;
  kept: LikelihoodState;
};

/** @example const search = createSearch({ system, layout, scale: "unknown" }); */
export function createSearch(problem: LikelihoodProblem): PenaltySearch {
  const { system, layout: { penalties } } = problem;
  const { defaults, lowest, highest } = boundsOf(system, penalties);
  const state = (): LikelihoodState => createState({
    size: system.size, penalties: penalties.length, arrow: system.form === "arrow" ? createArrowState(system.groups, system.size) : null,
  });
  return { problem, penalties, defaults, lowest, highest, current: state(), trial: state(), kept: state() };
}

/**
 * Another search of the same working model, in the states that the first has to spare: its current one stays as it is, so long
 * as the second is used alone. Nothing is kept in it.
 *
 * @example const other = searchBeside(search);
 */
export function searchBeside({ problem, penalties, trial, kept }: PenaltySearch): PenaltySearch {
  const { defaults, lowest, highest } = boundsOf(problem.system, penalties);
  return { problem, penalties, defaults, lowest, highest, current: kept, trial, kept };
}

function boundsOf(system: PenalisedSystem, penalties: readonly Penalty[]): Pick<PenaltySearch, "defaults" | "lowest" | "highest"> {
  const bounds = { defaults: new Float64Array(penalties.length), lowest: new Float64Array(penalties.length), highest: new Float64Array(penalties.length) };
  penalties.forEach((penalty, j) => {
    const { own, whole } = scaleOf(system, penalty);
    bounds.defaults[j] = Math.log(own);
    bounds.lowest[j] = Math.max(bounds.defaults[j] - downwards, Math.log(whole * ownShareOfLowest));
    bounds.highest[j] = bounds.defaults[j] + upwards;
  });
  return bounds;
}

function scaleOf(system: PenalisedSystem, penalty: Penalty): { own: number; whole: number } {
  const { start, end } = penalty;
  let own = 0;
  let before = 0;
  let weights = 0;
  const offset = system.form === "arrow" ? system.unpenalised : 0;
  for (let k = start; k < end; k++) {
    const weight = weightAt(penalty, k);
    weights += weight;
    // A weighted penalty halves where its weighted diagonal equals that of X'WX.
    const share = weight > 0 ? 1 : 0;
    if (penalty.grouped) before += share * (system.form === "arrow" ? system.groupDiagonal[k] : 0);
    else {
      before += share * system.diagonal[offset + k];
      if (system.form === "dense") own += share * system.matrix[k * (system.size + 1)];
    }
  }
  const whole = Math.max(before / weights, Number.MIN_VALUE * 1e60);
  return { own: system.form === "dense" ? Math.max(own / weights, ownShareOfDefault * whole) : whole, whole };
}

/** Points a search at another working model of the same design. */
export function repoint(search: PenaltySearch, system: PenalisedSystem): void {
  search.problem = { ...search.problem, system };
}

/** Evaluates into `current`. */
export function evaluateAt(search: PenaltySearch, logPenalties: Float64Array): void {
  evaluateLikelihood(search.problem, logPenalties, search.current);
}

/** The current state with its gradient, and its Hessian where asked for; an infinite criterion has neither. */
export function derivatives(search: PenaltySearch, level: "gradient" | "hessian"): LikelihoodState {
  const { current } = search;
  if (Number.isFinite(current.criterion)) differentiate(search.problem, current, level);
  return current;
}

/**
 * Evaluates a trial, and makes it current if `accept` says so.
 *
 * @returns whether it was accepted.
 */
export function tryPenalties(search: PenaltySearch, logPenalties: Float64Array, accept: (trial: LikelihoodState) => boolean): boolean {
  evaluateLikelihood(search.problem, logPenalties, search.trial);
  if (!accept(search.trial)) return false;
  const before = search.current;
  search.current = search.trial;
  search.trial = before;
  return true;
}

/** Sets the current state aside (`keep`), or brings back what was set aside (`restore`). */
export function exchangeKept(search: PenaltySearch): void {
  const { current } = search;
  search.current = search.kept;
  search.kept = current;
}

/** Keeps a log penalty within its bounds. */
export const withinBounds = (search: PenaltySearch, penalty: number, logPenalty: number): number =>
  Math.min(search.highest[penalty], Math.max(search.lowest[penalty], logPenalty));
