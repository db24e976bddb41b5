import { backwardSolve, choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import type { PenaltySearch } from "./penalty-search";
import { derivatives } from "./penalty-search";

/** Largest change of a log penalty in one Newton step. */
const longestStep = 5;
/** Step of a penalty whose criterion hardly bends, or downwards: any length that lowers it will do, and shorter is slower. */
const downhillStep = 4.5;
/** Share of its slope that a penalty's curvature must exceed for a Newton step. */
const leastBend = 0.2;

/** Degrees of freedom below which a penalty may be in its tail, and to which one that wants out of it is brought at once. */
const tailEdf = 0.5;
const leastEdf = 1e-9;
/** Twice the fall of the criterion that the other penalties may still promise when those in their tails go to their limits. */
const nearlyAtRest = 0.1;

/** Where a search stood one step ago. */
export type EarlierPoint = { logPenalties: Float64Array; gradient: Float64Array };

/**
 * Newton direction of the penalties whose criterion bends upwards. The others, each by itself: downhill, or, where the slope
 * changed its sign since the step before, to where the line between the two slopes is zero. Towards its limit a penalty's
 * criterion changes as exp(-log penalty), which Newton would follow one unit a step: there it goes to the limit, or out of
 * the tail, at once. To the limit only when the bent ones are nearly at rest, as until then they may want it back.
 *
 * @param free the penalties that may move.
 * @param earlier null at the first step.
 * @returns one step per free penalty, which bounds may cut.
 * @example const direction = newtonDirection(search, [0, 1], null);
 */
export function newtonDirection(search: PenaltySearch, free: readonly number[], earlier: EarlierPoint | null): Float64Array {
  const { gradient, hessian, edf, logPenalties } = derivatives(search, "hessian");
  const direction = new Float64Array(free.length);
  const bent: number[] = [];
  const tails: number[] = [];
  for (let i = 0; i < free.length; i++) {
    const penalty = free[i];
    const slope = gradient[penalty];
    const curvature = hessian[penalty * (gradient.length + 1)];
    // In the tail slope and curvature are each other's negatives, whichever way the penalty wants to go.
    if (edf[penalty] < tailEdf && Math.abs(slope + curvature) < 0.25 * Math.abs(curvature)) {
      if (slope > 0) direction[i] = -Math.max(downhillStep, Math.log(tailEdf / Math.max(edf[penalty], leastEdf)));
      else tails.push(i);
    } else if (curvature > leastBend * Math.abs(slope)) bent.push(i);
    else if (earlier !== null && slope * earlier.gradient[penalty] < 0) {
      direction[i] = (slope * (logPenalties[penalty] - earlier.logPenalties[penalty])) / (earlier.gradient[penalty] - slope);
    } else direction[i] = -downhillStep * Math.sign(slope);
  }
  const fall = stepBent(search, free, { bent, direction });
  if (fall < nearlyAtRest) for (const i of tails) direction[i] = search.highest[free[i]] - search.lowest[free[i]];
  return direction;
}

/**
 * Newton's step for the bent penalties, written into `direction`; where their Hessian is not positive definite, each by its
 * own curvature.
 *
 * @returns minus gradient x step.
 */
function stepBent(
  { current: { gradient, hessian } }: PenaltySearch, free: readonly number[], of: { bent: readonly number[]; direction: Float64Array },
): number {
  const { bent, direction } = of;
  const size = bent.length;
  const matrix = new Float64Array(size * size);
  const steps = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    steps[i] = -gradient[free[bent[i]]];
    for (let j = 0; j < size; j++) matrix[i * size + j] = hessian[free[bent[i]] * gradient.length + free[bent[j]]];
  }
  if (choleskyInPlace(matrix, size)) {
    forwardSolve(matrix, size, steps);
    backwardSolve(matrix, size, steps);
  } else for (let i = 0; i < size; i++) steps[i] /= hessian[free[bent[i]] * (gradient.length + 1)];
  let longest = 0;
  for (let i = 0; i < size; i++) longest = Math.max(longest, Math.abs(steps[i]));
  let fall = 0;
  for (let i = 0; i < size; i++) {
    direction[bent[i]] = longest > longestStep ? (steps[i] * longestStep) / longest : steps[i];
    fall -= gradient[free[bent[i]]] * direction[bent[i]];
  }
  return fall;
}
