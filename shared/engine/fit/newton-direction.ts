import { backwardSolve, choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import type { PenaltySearch } from "./penalty-search";
import { derivatives } from "./penalty-search";

/** Largest change of a log penalty in one step. */
const longestStep = 5;
/** Step of a penalty whose criterion bends downwards: any length that lowers it will do, and shorter is slower. */
const downhillStep = 4.5;

/** Degrees of freedom below which a penalty may be in its tail, and to which one that wants out of it is brought at once. */
const tailEdf = 0.5;
const leastEdf = 1e-9;
/** Twice the fall of the criterion that the other penalties may still promise when those in their tails go to their limits. */
const nearlyAtRest = 0.1;

/**
 * Newton direction of the penalties that may move; where their Hessian is not positive definite, each by its own curvature.
 * Towards its limit a penalty's criterion changes as exp(-log penalty), which Newton would follow one unit a step: there
 * it goes to the limit, or out of the tail, at once. To the limit only when the others are nearly at rest, as until then they
 * may want it back.
 *
 * @param free the penalties that may move.
 * @returns one step per free penalty, which bounds may cut.
 * @example const direction = newtonDirection(search, [0, 1]);
 */
export function newtonDirection(search: PenaltySearch, free: readonly number[]): Float64Array {
  const { gradient, edf } = derivatives(search, "hessian");
  const inside = free.filter((penalty) => !isInTail(search, penalty));
  const steps = insideSteps(search, inside);
  let fall = 0;
  for (let i = 0; i < inside.length; i++) fall -= steps[i] * gradient[inside[i]];
  const direction = new Float64Array(free.length);
  for (let i = 0, at = 0; i < free.length; i++) {
    const penalty = free[i];
    if (penalty === inside[at]) direction[i] = steps[at++];
    else if (gradient[penalty] > 0) direction[i] = -Math.max(downhillStep, Math.log(tailEdf / Math.max(edf[penalty], leastEdf)));
    else if (fall < nearlyAtRest) direction[i] = search.highest[penalty] - search.lowest[penalty];
  }
  return direction;
}

/** In the tail a penalty's slope is minus its curvature, whichever way it wants to go. */
function isInTail({ current: { gradient, hessian, edf } }: PenaltySearch, penalty: number): boolean {
  const curvature = hessian[penalty * (gradient.length + 1)];
  return edf[penalty] < tailEdf && Math.abs(gradient[penalty] + curvature) < 0.25 * Math.abs(curvature);
}

function insideSteps({ current: { gradient, hessian } }: PenaltySearch, inside: readonly number[]): Float64Array {
  const size = inside.length;
  const matrix = new Float64Array(size * size);
  const steps = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    steps[i] = -gradient[inside[i]];
    for (let j = 0; j < size; j++) matrix[i * size + j] = hessian[inside[i] * gradient.length + inside[j]];
  }
  if (choleskyInPlace(matrix, size)) {
    forwardSolve(matrix, size, steps);
    backwardSolve(matrix, size, steps);
  } else {
    for (let i = 0; i < size; i++) {
      const curvature = hessian[inside[i] * (gradient.length + 1)];
      const slope = gradient[inside[i]];
      steps[i] = curvature > 0.2 * Math.abs(slope) ? -slope / curvature : -downhillStep * Math.sign(slope);
    }
  }
  let longest = 0;
  for (let i = 0; i < size; i++) longest = Math.max(longest, Math.abs(steps[i]));
  if (longest > longestStep) for (let i = 0; i < size; i++) steps[i] *= longestStep / longest;
  return steps;
}
