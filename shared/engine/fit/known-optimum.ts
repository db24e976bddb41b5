import type { PenaltySearch } from "./penalty-search";
import { derivatives } from "./penalty-search";

/** An optimum found before, so that a search from another start can stop once it is drawn to it. */
export type KnownOptimum = { logPenalties: Float64Array; criterion: number };

/** Log units within which two points belong to one optimum. */
export const near = 0.25;
/** The longest Newton step whose end is trusted for that. */
const trusted = 2.5;
/** What a penalty's way to the known optimum may change of the criterion, by its slope and bend here, to be of no account. */
const flat = 1e-3;

/** One that lies lower already is drawn elsewhere, however level the way may look from there. */
const isHigher = ({ current }: PenaltySearch, known: KnownOptimum): boolean => current.criterion > known.criterion;

/**
 * Whether a search has come to a known optimum.
 *
 * @param automatic the penalties that are chosen.
 * @example if (isNear(search, automatic, known)) return "known";
 */
export function isNear(search: PenaltySearch, automatic: readonly number[], known: KnownOptimum): boolean {
  const { logPenalties } = search.current;
  return isHigher(search, known) && automatic.every((penalty) =>
    Math.abs(logPenalties[penalty] - known.logPenalties[penalty]) < near || goesToLimit(search, penalty, known));
}

/**
 * Whether a short Newton step ends at the known optimum.
 *
 * @param step the penalties that move, by how much, and all that are chosen.
 * @example if (pointsTo(search, { free, direction, automatic }, known)) return "known";
 */
export function pointsTo(
  search: PenaltySearch, step: { free: readonly number[]; direction: Float64Array; automatic: readonly number[] }, known: KnownOptimum,
): boolean {
  const { free, direction, automatic } = step;
  const { logPenalties } = search.current;
  return isHigher(search, known) && automatic.every((penalty) => {
    if (goesToLimit(search, penalty, known) || isLevel(search, penalty, known)) return true;
    const at = free.indexOf(penalty);
    const move = at < 0 ? 0 : direction[at];
    return Math.abs(move) < trusted && Math.abs(logPenalties[penalty] + move - known.logPenalties[penalty]) < near;
  });
}

/** Both are on their way to the limit: the known optimum is there, and nothing but a falling criterion lies ahead. */
function goesToLimit(search: PenaltySearch, penalty: number, { logPenalties }: KnownOptimum): boolean {
  const { gradient, edf } = derivatives(search, "gradient");
  return logPenalties[penalty] >= search.highest[penalty] && edf[penalty] < 0.3 && gradient[penalty] < 0;
}

/** Whether the criterion is all but level between a penalty and the known optimum, as where a curve is unpenalised anyway. */
function isLevel({ current: { gradient, hessian, logPenalties } }: PenaltySearch, penalty: number, known: KnownOptimum): boolean {
  const way = known.logPenalties[penalty] - logPenalties[penalty];
  return Math.abs(gradient[penalty] * way) + Math.abs(hessian[penalty * (gradient.length + 1)]) * way * way < flat;
}
