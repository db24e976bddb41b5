import { EngineError } from "../errors";
import { exponential } from "./exponential";
import type { IterativeRules, WorkingRows } from "./family-rules";
import { countInterval } from "./count-interval";

/**
 * Log link, variance = dispersion x mean; the dispersion is Pearson's statistic over n - edf.
 * Source: McCullagh & Nelder (1989), Generalized Linear Models, sections 6.2 and 9.2.
 */
export const quasiPoisson: IterativeRules = {
  fitting: "iterative",
  check(response, column) {
    let total = 0;
    for (let row = 0; row < response.length; row++) {
      if (response[row] < 0) {
        throw new EngineError(
          "response-invalid",
          `Response "${column}" must not be negative for quasi-poisson; row ${row + 1} is ${response[row]}.`,
        );
      }
      total += response[row];
    }
    if (response.length > 0 && !(total > 0)) {
      throw new EngineError("response-invalid", `Response "${column}" is 0 in every row; quasi-poisson needs a value above 0.`);
    }
  },
  start: (response) => Math.log(response + 0.1),
  mean: (linearPredictor) => exponential(linearPredictor),
  median: null,
  unitDeviance: (response, mean) =>
    Math.max(0, 2 * (response > 0 ? response * Math.log(response / mean) - (response - mean) : mean)),
  working: fillWorking,
  pearson(response, mean, weights) {
    let sum = 0;
    for (let row = 0; row < response.length; row++) {
      const residual = response[row] - mean[row];
      sum += (weights[row] * residual * residual) / mean[row];
    }
    return sum;
  },
  nullMean(response, offset, weights) {
    let units = 0;
    let exposure = 0;
    const exposures = offset.map(exponential);
    for (let row = 0; row < response.length; row++) {
      units += weights[row] * response[row];
      exposure += weights[row] * exposures[row];
    }
    return exposures.map((value) => (value * units) / exposure);
  },
  meanInterval({ linearPredictor, standardError, quantile }) {
    const half = quantile * standardError;
    return { lower: exponential(linearPredictor - half), upper: exponential(linearPredictor + half) };
  },
  observationInterval: countInterval,
};

/** Working response eta - offset + (y - mu) / mu, working weight mu (Green & Silverman 1994, section 5.1.2). */
function fillWorking(rows: WorkingRows): void {
  const { response, offset, weights, linearPredictor, mean, workingResponse, workingWeights } = rows;
  for (let row = 0; row < response.length; row++) {
    const mu = mean[row];
    workingResponse[row] = linearPredictor[row] - offset[row] + (response[row] - mu) / mu;
    workingWeights[row] = weights[row] * mu;
  }
}
