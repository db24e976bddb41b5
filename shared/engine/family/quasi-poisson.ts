import { betweenQuantile } from "./between-quantile";
import { exponential } from "./exponential";
import type { IterativeRules, WorkingRows } from "./family-rules";
import { countInterval } from "./count-interval";
import { countPlace } from "./count-place";
import { checkSomeUnits, checkUnits, logLinkInterval, logLinkStart } from "./log-link";
import { pearsonStatistic } from "./pearson-statistic";

const variance = (mean: number): number => mean;

/**
 * Log link, variance = dispersion x mean; the dispersion is Pearson's statistic over n - edf.
 * Source: McCullagh & Nelder (1989), Generalized Linear Models, sections 6.2 and 9.2.
 */
export const quasiPoisson: IterativeRules = {
  fitting: "iterative",
  scale: "unknown",
  check: (response, column) => checkSomeUnits(response, { column, family: "quasi-poisson" }),
  checkValues: (response, column) => checkUnits(response, { column, family: "quasi-poisson" }),
  start: logLinkStart,
  mean: (linearPredictor) => exponential(linearPredictor),
  median: null,
  logLikelihood: null,
  variance,
  unitDeviance: (response, mean) =>
    Math.max(0, 2 * (response > 0 ? response * Math.log(response / mean) - (response - mean) : mean)),
  working: fillWorking,
  pearson: pearsonStatistic(variance),
  nullMean({ response, offset, weights }) {
    let units = 0;
    let exposure = 0;
    const exposures = offset.map(exponential);
    for (let row = 0; row < response.length; row++) {
      units += weights[row] * response[row];
      exposure += weights[row] * exposures[row];
    }
    return exposures.map((value) => (value * units) / exposure);
  },
  estimateTheta: null,
  meanInterval: logLinkInterval,
  observationInterval: (row) => countInterval(row, () => row.dispersion),
  quantileResidual({ response, linearPredictor, weight, dispersion, fractional }, uniform) {
    return betweenQuantile(countPlace({ response, mean: exponential(linearPredictor), ratio: dispersion / weight, fractional }), uniform);
  },
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
