import { isNear, pointsTo } from "./known-optimum";
import type { KnownOptimum } from "./known-optimum";
import { newtonDirection } from "./newton-direction";
import type { EarlierPoint } from "./newton-direction";
import type { PenaltySearch } from "./penalty-search";
import { derivatives, tryPenalties, withinBounds } from "./penalty-search";

/** Largest change of a log penalty in a Fellner-Schall step, which is sure in direction: from a stiff start there is far to go. */
const longestSureStep = 8;
const gradientTolerance = 1e-7;

/**
 * One Fellner-Schall step on the automatic penalties: penalty x b'b / scale moves to the penalty's effective degrees of
 * freedom. Sure in direction, but slow near the end. Source: Wood & Fasiolo (2017), Biometrics 73, equation 6.
 *
 * @param automatic the penalties to be chosen.
 */
export function fellnerSchallStep(search: PenaltySearch, automatic: readonly number[]): void {
  const current = derivatives(search, "gradient");
  const { system, scale: known } = search.problem;
  const scale = known === "known" ? 1 : current.penalisedResidual / (system.rowCount - system.unpenalisedKept);
  const next = current.logPenalties.slice();
  for (const penalty of automatic) {
    const wanted = Math.log((scale * Math.max(current.edf[penalty], 1e-12)) / Math.max(current.squares[penalty], Number.MIN_VALUE * 1e30));
    const step = Math.min(longestSureStep, Math.max(-longestSureStep, wanted - next[penalty]));
    if (Number.isFinite(step)) next[penalty] = withinBounds(search, penalty, next[penalty] + step);
  }
  tryPenalties(search, next, (trial) => Number.isFinite(trial.criterion));
}

/**
 * A step that promises the criterion no more than this is the last: Newton's error being squared each time, what is left
 * after it is below the gradient's tolerance.
 */
const lastFall = 1e-7;
/** Of a sum over many rows as much is rounding. */
const lastShare = 2e-12;
/** And one that promises no more than this is not worth its evaluation. */
const noFall = 1e-11;

/** Minus gradient x step: twice what a Newton step takes off the criterion. */
function expectedFall({ current: { gradient } }: PenaltySearch, free: readonly number[], direction: Float64Array): number {
  let fall = 0;
  for (let i = 0; i < free.length; i++) fall -= gradient[free[i]] * direction[i];
  return fall;
}

/** Penalties still free to move: not at a bound that the gradient points beyond. */
function movable(search: PenaltySearch, automatic: readonly number[]): number[] {
  const { gradient, logPenalties } = derivatives(search, "gradient");
  return automatic.filter((penalty) => {
    const isHeldAbove = logPenalties[penalty] >= search.highest[penalty] && gradient[penalty] <= 0;
    const isHeldBelow = logPenalties[penalty] <= search.lowest[penalty] && gradient[penalty] >= 0;
    return !isHeldAbove && !isHeldBelow;
  });
}

/** How a search ended: at rest, drawn to the optimum known already, or out of steps. */
export type SearchEnd = "rested" | "known" | "unfinished";

export type NewtonOptions = { maxSteps: number; enough?: number; known?: KnownOptimum };

/**
 * Newton's method on the automatic log penalties with the exact Hessian, guarded by step halving and bounds.
 * Source: Wood (2011), section 6.2.
 *
 * @param options.maxSteps steps allowed. options.enough a step that promises the criterion no more is the last, at rest or not.
 * options.known an optimum found before: the search stops once it is drawn to it.
 * @returns "rested" when the gradient of every movable penalty vanished.
 */
export function newtonSteps(search: PenaltySearch, automatic: readonly number[], options: NewtonOptions): SearchEnd {
  const { maxSteps, enough = 0, known } = options;
  let earlier: EarlierPoint | null = null;
  for (let step = 0; step <= maxSteps; step++) {
    if (!Number.isFinite(search.current.criterion)) return "unfinished";
    const free = movable(search, automatic);
    if (free.every((penalty) => Math.abs(search.current.gradient[penalty]) < gradientTolerance)) return "rested";
    if (known !== undefined && isNear(search, automatic, known)) return "known";
    if (step === maxSteps) return "unfinished";
    const direction = newtonDirection(search, free, earlier);
    if (known !== undefined && pointsTo(search, { free, direction, automatic }, known)) return "known";
    const fall = expectedFall(search, free, direction);
    if (fall < noFall) return "rested";
    earlier = { logPenalties: search.current.logPenalties.slice(), gradient: search.current.gradient.slice() };
    const isLast = fall < lastFall + lastShare * Math.abs(search.current.criterion);
    if (!descend(search, free, direction)) return isLast ? "rested" : "unfinished";
    if (isLast) return "rested";
    if (fall < enough) return "unfinished";
  }
  return "unfinished";
}

/** @returns false where no fraction of the step lowers the criterion: rounding is all that is left, or the system is singular. */
function descend(search: PenaltySearch, free: readonly number[], direction: Float64Array): boolean {
  const from = search.current.logPenalties.slice();
  const before = search.current.criterion;
  const allowance = 1e-13 * Math.abs(before);
  for (let fraction = 1; fraction > 1e-7; fraction /= 2) {
    const next = from.slice();
    for (let i = 0; i < free.length; i++) next[free[i]] = withinBounds(search, free[i], from[free[i]] + fraction * direction[i]);
    if (tryPenalties(search, next, (trial) => trial.criterion <= before + allowance)) return true;
  }
  return false;
}
