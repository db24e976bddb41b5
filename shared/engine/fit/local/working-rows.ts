import type { FamilyRules } from "../../family/family-rules";
import type { FittedRows } from "../fitted-rows";

/** Working response (without the offset) and weights of the rows; of a normal family they stay what they are. */
export type WorkingRows = {
  family: FamilyRules;
  rows: FittedRows;
  response: Float64Array;
  weights: Float64Array;
  /** Weights before the smallest were raised: what a row that runs off to zero has to say. */
  plain: Float64Array;
  mean: Float64Array;
};

/** Share of the largest working weight below which a row says nothing, and no row may go: a point's weight is divided by. */
const smallestShare = 1e-12;

/** @example const working = createWorkingRows(familyRules("quasi-poisson"), rows); */
export function createWorkingRows(family: FamilyRules, rows: FittedRows): WorkingRows {
  const empty = () => new Float64Array(rows.count);
  if (family.fitting === "iterative") return { family, rows, response: empty(), weights: empty(), plain: empty(), mean: empty() };
  const response = family.transform(rows.response).map((value, row) => value - rows.offset[row]);
  return { family, rows, response, weights: rows.weights, plain: rows.weights, mean: empty() };
}

/**
 * The working model at a linear predictor.
 *
 * @param working `response`, `weights`, `plain` and `mean` are overwritten, unless the family is normal.
 * @example writeWorkingRows(working, predictor, 1);
 */
export function writeWorkingRows(working: WorkingRows, predictor: Float64Array, theta: number): void {
  const { family, rows, mean, response, weights, plain } = working;
  if (family.fitting === "exact") return;
  for (let row = 0; row < mean.length; row++) mean[row] = family.mean(predictor[row], 1);
  family.working({ ...rows, linearPredictor: predictor, mean, theta, workingResponse: response, workingWeights: weights });
  plain.set(weights);
  const least = smallestShare * weights.reduce((most, weight) => Math.max(most, weight), 0);
  for (let row = 0; row < weights.length; row++) weights[row] = Math.max(weights[row], least);
}
