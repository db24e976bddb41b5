import { backwardSolve, choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import type { PenaltySearch } from "./penalty-search";
import { tryPenalties, withinBounds } from "./penalty-search";
import type { ReducedSystem } from "./reduced-system";

/** Largest change of a log penalty in one step. */
const longestStep = 5;
const gradientTolerance = 1e-7;

/**
 * One Fellner-Schall step on the automatic penalties: penalty x b'b / scale moves to the block's effective degrees of
 * freedom. Sure in direction, but slow near the end. Source: Wood & Fasiolo (2017), Biometrics 73, equation 6.
 *
 * @param automatic the blocks whose penalty is to be chosen.
 */
export function fellnerSchallStep(search: PenaltySearch, reduced: ReducedSystem, automatic: readonly number[]): void {
  const { current } = search;
  const scale = current.penalisedResidual / (reduced.rowCount - reduced.unpenalisedKept);
  const next = current.logPenalties.slice();
  for (const block of automatic) {
    const wanted = Math.log((scale * Math.max(current.edf[block], 1e-12)) / Math.max(current.squares[block], Number.MIN_VALUE * 1e30));
    const step = Math.min(longestStep, Math.max(-longestStep, wanted - next[block]));
    if (Number.isFinite(step)) next[block] = withinBounds(search, block, next[block] + step);
  }
  tryPenalties(search, reduced, next, (trial) => Number.isFinite(trial.criterion));
}

/** Blocks still free to move: not at a bound that the gradient points beyond. */
function movable(search: PenaltySearch, automatic: readonly number[]): number[] {
  const { gradient, logPenalties } = search.current;
  return automatic.filter((block) => {
    const isHeldAbove = logPenalties[block] >= search.highest[block] && gradient[block] <= 0;
    const isHeldBelow = logPenalties[block] <= search.lowest[block] && gradient[block] >= 0;
    return !isHeldAbove && !isHeldBelow;
  });
}

/** Newton direction of the movable blocks; where the Hessian is not positive definite, each by its own curvature. */
function newtonDirection(search: PenaltySearch, free: readonly number[]): Float64Array {
  const { gradient, hessian } = search.current;
  const count = search.blocks.length;
  const size = free.length;
  const matrix = new Float64Array(size * size);
  free.forEach((row, i) => free.forEach((column, j) => { matrix[i * size + j] = hessian[row * count + column]; }));
  const direction = Float64Array.from(free, (block) => -gradient[block]);
  if (choleskyInPlace(matrix, size)) {
    forwardSolve(matrix, size, direction);
    backwardSolve(matrix, size, direction);
  } else {
    free.forEach((block, i) => {
      const curvature = Math.abs(hessian[block * count + block]);
      direction[i] = -gradient[block] / Math.max(curvature, 0.2 * Math.abs(gradient[block]), Number.MIN_VALUE * 1e30);
    });
  }
  const longest = direction.reduce((most, step) => Math.max(most, Math.abs(step)), 0);
  return longest > longestStep ? direction.map((step) => (step * longestStep) / longest) : direction;
}

/**
 * Newton's method on the automatic log penalties with the exact Hessian, guarded by step halving and bounds.
 * Source: Wood (2011), section 6.2.
 *
 * @param options.maxSteps steps allowed. options.stopNear penalties of an optimum known already: the search stops once
 * it is drawn to that one.
 * @returns true when the gradient of every movable block vanished.
 */
export function newtonSteps(
  search: PenaltySearch, reduced: ReducedSystem, automatic: readonly number[], options: { maxSteps: number; stopNear?: Float64Array },
): boolean {
  for (let step = 0; step <= options.maxSteps; step++) {
    const free = movable(search, automatic);
    if (free.every((block) => Math.abs(search.current.gradient[block]) < gradientTolerance)) return true;
    if (options.stopNear !== undefined && isNear(search, automatic, options.stopNear)) return true;
    if (step === options.maxSteps || !descend(search, reduced, free)) return false;
  }
  return false;
}

/** @returns false where no fraction of the step lowers the criterion: rounding is all that is left, or the system is singular. */
function descend(search: PenaltySearch, reduced: ReducedSystem, free: readonly number[]): boolean {
  const direction = newtonDirection(search, free);
  const from = search.current.logPenalties.slice();
  const before = search.current.criterion;
  const allowance = 1e-13 * Math.abs(before);
  for (let fraction = 1; fraction > 1e-7; fraction /= 2) {
    const next = from.slice();
    free.forEach((block, i) => { next[block] = withinBounds(search, block, from[block] + fraction * direction[i]); });
    if (tryPenalties(search, reduced, next, (trial) => trial.criterion <= before + allowance)) return true;
  }
  return false;
}

function isNear(search: PenaltySearch, automatic: readonly number[], known: Float64Array): boolean {
  return automatic.every((block) => Math.abs(search.current.logPenalties[block] - known[block]) < 0.25);
}
