import type { FamilyRules } from "../family/family-rules";
import type { FittedRows } from "./fitted-rows";
import { perfectShare } from "./restricted-likelihood";
import type { WorkingFit } from "./working-fit";

export type Goodness = { deviance: number; nullDeviance: number; dispersion: number; isPerfect: boolean; logLikelihood: number | null };

/**
 * Deviance, null deviance (intercept and offset only), log-likelihood, and dispersion: Pearson's statistic over n - edf, or
 * 1 where the scale is known.
 *
 * @param edf total effective degrees of freedom (with local curves, what they take of the residuals).
 * @example goodness(family, rows, fit, 5.2).dispersion;
 */
export function goodness(family: FamilyRules, rows: FittedRows, fit: WorkingFit, edf: number): Goodness {
  const { deviance, nullDeviance, pearson } = family.fitting === "exact" ? exactSums(family, rows, fit) : iterativeSums(family, rows, fit);
  const { solution: { system, search } } = fit;
  const freedom = rows.count - edf;
  // With as many effective parameters as rows, what the restricted likelihood takes for the scale is all there is.
  const likelihoodScale = search.current.penalisedResidual / (rows.count - system.unpenalisedKept);
  const estimated = freedom > 1e-6 * rows.count ? pearson / freedom : likelihoodScale;
  return {
    deviance, nullDeviance,
    dispersion: family.scale === "known" ? 1 : estimated,
    isPerfect: family.scale === "unknown" && !(deviance > perfectShare * system.yardstick),
    logLikelihood: family.logLikelihood?.({
      response: rows.response, linearPredictor: fit.linearPredictor, weights: rows.weights, theta: fit.theta ?? 1,
    }) ?? null,
  };
}

type Sums = { deviance: number; nullDeviance: number; pearson: number };

function exactSums(family: Extract<FamilyRules, { fitting: "exact" }>, { response, offset, weights }: FittedRows, fit: WorkingFit): Sums {
  const values = family.transform(response);
  const deviance = weightedSquares(values, fit.linearPredictor, weights);
  return { deviance, pearson: deviance, nullDeviance: weightedSquares(values, meanAndOffset(values, offset, weights), weights) };
}

function iterativeSums(family: Extract<FamilyRules, { fitting: "iterative" }>, rows: FittedRows, fit: WorkingFit): Sums {
  const { response, offset, weights } = rows;
  const theta = fit.theta ?? 1;
  const mean = new Float64Array(response.length);
  for (let row = 0; row < mean.length; row++) mean[row] = family.mean(fit.linearPredictor[row], 1);
  const total = (means: Float64Array) => {
    let sum = 0;
    for (let row = 0; row < means.length; row++) sum += weights[row] * family.unitDeviance(response[row], means[row], theta);
    return sum;
  };
  return {
    deviance: total(mean),
    nullDeviance: total(family.nullMean({ response, offset, weights, theta })),
    pearson: family.pearson({ response, mean, weights, theta }),
  };
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
  const mean = offset.slice();
  for (let row = 0; row < mean.length; row++) mean[row] += sum / weight;
  return mean;
}
