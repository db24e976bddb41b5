import type { PenaltyBlock } from "./design";
import type { ReducedSystem } from "./reduced-system";
import { createState, evaluateLikelihood } from "./restricted-likelihood";
import type { LikelihoodState } from "./restricted-likelihood";

/** How far, in log units, a penalty may go from its default before it is frozen there: a straight line, or no penalty. */
const upwards = 16;
const downwards = 20;
/** A block the unpenalised columns all but reproduce keeps rounding only; penalties are not let near that. */
const ownShareOfDefault = 1e-8;
const ownShareOfLowest = 1e-12;

/** The penalties of one model while they are searched for; holds two states, so that a trial can be refused. */
export type PenaltySearch = {
  blocks: readonly PenaltyBlock[];
  /** Mean diagonal of each block of X'WX in coordinates where the penalty is the identity: a penalty of this size halves. */
  defaults: Float64Array;
  lowest: Float64Array;
  highest: Float64Array;
  current: LikelihoodState;
  trial: LikelihoodState;
  work: Float64Array;
};

/** @example const search = createSearch(reduced, design.blocks); */
export function createSearch(reduced: ReducedSystem, blocks: readonly PenaltyBlock[]): PenaltySearch {
  const scales = blocks.map(({ start, end }) => {
    let own = 0;
    let before = 0;
    for (let k = start; k < end; k++) {
      own += reduced.matrix[k * reduced.size + k];
      before += reduced.diagonal[k];
    }
    const whole = Math.max(before / (end - start), Number.MIN_VALUE * 1e60);
    return { own: Math.max(own / (end - start), ownShareOfDefault * whole), whole };
  });
  const defaults = Float64Array.from(scales, ({ own }) => Math.log(own));
  return {
    blocks,
    defaults,
    lowest: Float64Array.from(scales, ({ own, whole }) => Math.max(Math.log(own) - downwards, Math.log(whole * ownShareOfLowest))),
    highest: defaults.map((value) => value + upwards),
    current: createState(reduced.size, blocks.length),
    trial: createState(reduced.size, blocks.length),
    work: new Float64Array(reduced.size * reduced.size),
  };
}

/** Evaluates into `current`. */
export function evaluateAt(search: PenaltySearch, reduced: ReducedSystem, logPenalties: Float64Array): void {
  evaluateLikelihood(reduced, { blocks: search.blocks, logPenalties, work: search.work }, search.current);
}

/**
 * Evaluates a trial, and makes it current if `accept` says so.
 *
 * @returns whether it was accepted.
 */
export function tryPenalties(
  search: PenaltySearch, reduced: ReducedSystem, logPenalties: Float64Array, accept: (trial: LikelihoodState) => boolean,
): boolean {
  evaluateLikelihood(reduced, { blocks: search.blocks, logPenalties, work: search.work }, search.trial);
  if (!accept(search.trial)) return false;
  const before = search.current;
  search.current = search.trial;
  search.trial = before;
  return true;
}

/** Keeps a log penalty of a block within its bounds. */
export const withinBounds = (search: PenaltySearch, block: number, logPenalty: number): number =>
  Math.min(search.highest[block], Math.max(search.lowest[block], logPenalty));

/** Whether a block's penalty went to its limit: the curve is the penalty's straight line (a circle: no curve). */
export const isAtLimit = (search: PenaltySearch, block: number): boolean => search.current.edf[block] < 1e-3;
