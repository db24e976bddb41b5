import type { IterativeRules } from "../family/family-rules";
import { penaltyValue } from "./working-fit";
import type { WorkingSolution } from "./working-model";

export type IterativeRows = { response: Float64Array; offset: Float64Array; weights: Float64Array };

/** What deviance and criterion are measured by, and whether a fit is at rest. */
export type FamilyRows = { family: IterativeRules; rows: IterativeRows };

/**
 * Weighted sum of unit deviances.
 *
 * @param predictor linear predictors, offset included.
 * @example devianceOf({ family, rows }, predictor, 1);
 */
export function devianceOf({ family, rows }: FamilyRows, predictor: Float64Array, theta: number): number {
  let sum = 0;
  for (let row = 0; row < predictor.length; row++) {
    sum += rows.weights[row] * family.unitDeviance(rows.response[row], family.mean(predictor[row], 1), theta);
  }
  return sum;
}

/**
 * Weighted mean square by which a linear predictor moved.
 *
 * @example movement(next, before, workingWeights) < 1e-13; // at rest
 */
export function movement(next: Float64Array, before: Float64Array, weights: Float64Array): number {
  let moved = 0;
  let total = 0;
  for (let row = 0; row < next.length; row++) {
    const change = next[row] - before[row];
    moved += weights[row] * change * change;
    total += weights[row];
  }
  return moved / total;
}

/**
 * The same yardstick for every working model: unknown scale, 1/2 [(n - Mp) ln(D + b'Sb) + ln|X'WX + S| - ln|S|+] with the
 * deviance as D; known scale, 1/2 [-2 log-likelihood + b'Sb + ln|X'WX + S| - ln|S|+].
 *
 * @example criterionAtRest({ family, rows }, { predictor, solution, theta: 1 });
 */
export function criterionAtRest(
  problem: FamilyRows,
  at: { predictor: Float64Array; solution: Pick<WorkingSolution, "search" | "system">; theta: number },
): number {
  const { family, rows } = problem;
  const { solution: { search, system }, predictor, theta } = at;
  const { penalisedResidual, criterion } = search.current;
  const penalty = penaltyValue(search);
  if (family.scale === "known" && family.logLikelihood !== null) {
    const likelihood = family.logLikelihood({ response: rows.response, linearPredictor: predictor, weights: rows.weights, theta });
    return criterion + 0.5 * (penalty - 2 * likelihood - penalisedResidual);
  }
  const deviance = Math.max(devianceOf(problem, predictor, theta) + penalty, Number.MIN_VALUE * 1e30);
  return criterion + 0.5 * (system.rowCount - system.unpenalisedKept) * (Math.log(deviance) - Math.log(penalisedResidual));
}
