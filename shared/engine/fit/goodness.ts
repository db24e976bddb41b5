import type { FamilyRules } from "../family/family-rules";
import type { FittedRows } from "./fitted-rows";
import { perfectShare } from "./restricted-likelihood";
import type { WorkingFit } from "./working-fit";

export type Goodness = { deviance: number; nullDeviance: number; dispersion: number; isPerfect: boolean };

/**
 * Deviance, null deviance (intercept and offset only) and dispersion: Pearson's statistic over n - edf.
 *
 * @param edf total effective degrees of freedom.
 * @example goodness(family, rows, fit, 5.2).dispersion;
 */
export function goodness(family: FamilyRules, rows: FittedRows, fit: WorkingFit, edf: number): Goodness {
  const { weights, offset } = rows;
  let deviance: number;
  let nullDeviance: number;
  let pearson: number;
  if (family.fitting === "exact") {
    const response = family.transform(rows.response);
    deviance = weightedSquares(response, fit.linearPredictor, weights);
    nullDeviance = weightedSquares(response, meanAndOffset(response, offset, weights), weights);
    pearson = deviance;
  } else {
    const mean = fit.linearPredictor.map((value) => family.mean(value, 1));
    const nullMean = family.nullMean(rows.response, offset, weights);
    const total = (means: Float64Array) =>
      rows.response.reduce((sum, value, row) => sum + weights[row] * family.unitDeviance(value, means[row]), 0);
    deviance = total(mean);
    nullDeviance = total(nullMean);
    pearson = family.pearson(rows.response, mean, weights);
  }
  const isPerfect = !(deviance > perfectShare * fit.reduced.yardstick);
  const freedom = rows.count - edf;
  // With as many effective parameters as rows, what the restricted likelihood takes for the scale is all there is.
  const likelihoodScale = fit.search.current.penalisedResidual / (rows.count - fit.reduced.unpenalisedKept);
  const dispersion = freedom > 1e-6 * rows.count ? pearson / freedom : likelihoodScale;
  return { deviance, nullDeviance, dispersion, isPerfect };
}

function weightedSquares(values: Float64Array, around: Float64Array, weights: Float64Array): number {
  let sum = 0;
  for (let row = 0; row < values.length; row++) {
    const residual = values[row] - around[row];
    sum += weights[row] * residual * residual;
  }
  return sum;
}

function meanAndOffset(response: Float64Array, offset: Float64Array, weights: Float64Array): Float64Array {
  let sum = 0;
  let weight = 0;
  for (let row = 0; row < response.length; row++) {
    sum += weights[row] * (response[row] - offset[row]);
    weight += weights[row];
  }
  return offset.map((value) => value + sum / weight);
}
