import { backwardSolve, choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import type { PenaltySearch } from "./penalty-search";
import { derivatives, tryPenalties, withinBounds } from "./penalty-search";

/** Largest change of a log penalty in one step. */
const longestStep = 5;
/** The same for a Fellner-Schall step, which is sure in direction: from a stiff start there is far to go. */
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

/** Step of a penalty whose criterion bends downwards: any length that lowers it will do, and shorter is slower. */
const downhillStep = 4.5;

/** Newton direction of the movable penalties; where the Hessian is not positive definite, each by its own curvature. */
function newtonDirection(search: PenaltySearch, free: readonly number[]): Float64Array {
  const { gradient, hessian } = derivatives(search, "hessian");
  const count = search.penalties.length;
  const size = free.length;
  const matrix = new Float64Array(size * size);
  const direction = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    direction[i] = -gradient[free[i]];
    for (let j = 0; j < size; j++) matrix[i * size + j] = hessian[free[i] * count + free[j]];
  }
  if (choleskyInPlace(matrix, size)) {
    forwardSolve(matrix, size, direction);
    backwardSolve(matrix, size, direction);
  } else {
    for (let i = 0; i < size; i++) {
      const curvature = hessian[free[i] * count + free[i]];
      const slope = gradient[free[i]];
      direction[i] = curvature > 0.2 * Math.abs(slope) ? -slope / curvature : -downhillStep * Math.sign(slope);
    }
  }
  let longest = 0;
  for (let i = 0; i < size; i++) longest = Math.max(longest, Math.abs(direction[i]));
  for (let i = 0; i < size; i++) {
    if (longest > longestStep) direction[i] *= longestStep / longest;
    if (isInTail(search, free[i], direction[i])) direction[i] = search.highest[free[i]] - search.lowest[free[i]];
  }
  return direction;
}

/**
 * Whether a penalty's criterion falls towards its limit as exp(-log penalty), which Newton would follow one unit a step:
 * the penalty goes to its limit at once.
 */
function isInTail(search: PenaltySearch, penalty: number, step: number): boolean {
  return Math.abs(step - 1) < 0.25 && search.current.edf[penalty] < 0.5;
}

/**
 * Newton's method on the automatic log penalties with the exact Hessian, guarded by step halving and bounds.
 * Source: Wood (2011), section 6.2.
 *
 * @param options.maxSteps steps allowed. options.stopNear penalties of an optimum known already: the search stops once
 * it is drawn to that one.
 * @returns true when the gradient of every movable penalty vanished.
 */
export function newtonSteps(
  search: PenaltySearch, automatic: readonly number[], options: { maxSteps: number; stopNear?: Float64Array },
): boolean {
  for (let step = 0; step <= options.maxSteps; step++) {
    if (!Number.isFinite(search.current.criterion)) return false;
    const free = movable(search, automatic);
    if (free.every((penalty) => Math.abs(search.current.gradient[penalty]) < gradientTolerance)) return true;
    if (options.stopNear !== undefined && isNear(search, automatic, options.stopNear)) return true;
    if (step === options.maxSteps) return false;
    const direction = newtonDirection(search, free);
    if (options.stopNear !== undefined && pointsTo(search, { free, direction, automatic }, options.stopNear)) return true;
    const fall = expectedFall(search, free, direction);
    if (!descend(search, free, direction)) return false;
    if (fall < lastFall) return true;
  }
  return false;
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

function isNear(search: PenaltySearch, automatic: readonly number[], known: Float64Array): boolean {
  const { logPenalties } = search.current;
  return automatic.every((penalty) =>
    Math.abs(logPenalties[penalty] - known[penalty]) < near || goesToLimit(search, penalty, known));
}

/** What a penalty's way to the known optimum may change of the criterion, by its slope and bend here, to be of no account. */
const flat = 1e-3;

/** Whether the criterion is all but level between a penalty and the known optimum, as where a curve is unpenalised anyway. */
function isLevel({ current: { gradient, hessian, logPenalties }, penalties }: PenaltySearch, penalty: number, known: Float64Array): boolean {
  const way = known[penalty] - logPenalties[penalty];
  return Math.abs(gradient[penalty] * way) + Math.abs(hessian[penalty * (penalties.length + 1)]) * way * way < flat;
}

/** Log units within which two points belong to one optimum, and the longest Newton step whose end is trusted for that. */
const near = 0.25;
const trusted = 2.5;

/** Both are on their way to the limit: the known optimum is there, and nothing but a falling criterion lies ahead. */
function goesToLimit(search: PenaltySearch, penalty: number, known: Float64Array): boolean {
  const { gradient, edf } = derivatives(search, "gradient");
  return known[penalty] >= search.highest[penalty] && edf[penalty] < 0.3 && gradient[penalty] < 0;
}

/** Whether a short Newton step ends at the known optimum. */
function pointsTo(
  search: PenaltySearch, step: { free: readonly number[]; direction: Float64Array; automatic: readonly number[] }, known: Float64Array,
): boolean {
  const { free, direction, automatic } = step;
  const { logPenalties } = search.current;
  return automatic.every((penalty) => {
    if (goesToLimit(search, penalty, known) || isLevel(search, penalty, known)) return true;
    const at = free.indexOf(penalty);
    const move = at < 0 ? 0 : direction[at];
    return Math.abs(move) < trusted && Math.abs(logPenalties[penalty] + move - known[penalty]) < near;
  });
}
