import { betweenQuantile } from "./between-quantile";
import { exponential } from "./exponential";
import type { IterativeRules, LikelihoodRows, WorkingRows } from "./family-rules";
import { countLogDensity } from "./count-distribution";
import { countInterval } from "./count-interval";
import { countPlace } from "./count-place";
import { checkSomeUnits, checkUnits, logLinkInterval, logLinkStart } from "./log-link";
import { logOfRatio } from "./gamma-ratio";
import { estimateTheta } from "./negative-binomial-theta";
import { nullMean } from "./null-mean";
import { pearsonStatistic } from "./pearson-statistic";

const mean = (linearPredictor: number): number => exponential(linearPredictor);
const variance = (mu: number, theta: number): number => mu * (1 + mu / theta);

/**
 * Counts with variance mean + mean^2 / theta, log link; theta by maximum likelihood at each working model. Fractional units are
 * allowed, as for quasi-Poisson: the likelihood is then that of the same formula.
 * Source: Lawless (1987), Canadian J. Statist. 15, 209-225; McCullagh & Nelder (1989), section 11.2.
 */
export const negativeBinomial: IterativeRules = {
  fitting: "iterative",
  scale: "known",
  check: (response, column) => checkSomeUnits(response, { column, family: "negative-binomial" }),
  checkValues: (response, column) => checkUnits(response, { column, family: "negative-binomial" }),
  start: logLinkStart,
  mean,
  median: null,
  logLikelihood,
  variance,
  unitDeviance(response, mu, theta) {
    const own = response > 0 ? response * Math.log(response / mu) : 0;
    return Math.max(0, 2 * (own - (response + theta) * logOfRatio(response, mu, theta)));
  },
  working: fillWorking,
  pearson: pearsonStatistic(variance),
  nullMean(rows) {
    let units = 0;
    let weight = 0;
    for (let row = 0; row < rows.response.length; row++) {
      units += rows.weights[row] * rows.response[row];
      weight += rows.weights[row];
    }
    return nullMean({ mean, working: fillWorking }, rows, Math.log(units / weight));
  },
  estimateTheta,
  meanInterval: logLinkInterval,
  observationInterval: (row) => countInterval(row, (mu) => 1 + mu / row.theta),
  quantileResidual({ response, linearPredictor, theta, fractional }, uniform) {
    const mu = mean(linearPredictor);
    return betweenQuantile(countPlace({ response, mean: mu, ratio: 1 + mu / theta, fractional }), uniform);
  },
};

/** Working response eta - offset + (y - mu) / mu, working weight mu / (1 + mu / theta). */
function fillWorking(rows: WorkingRows): void {
  const { response, offset, weights, linearPredictor, mean: means, theta, workingResponse, workingWeights } = rows;
  for (let row = 0; row < response.length; row++) {
    const mu = means[row];
    workingResponse[row] = linearPredictor[row] - offset[row] + (response[row] - mu) / mu;
    workingWeights[row] = (weights[row] * mu) / (1 + mu / theta);
  }
}

function logLikelihood({ response, linearPredictor, weights, theta }: LikelihoodRows): number {
  let sum = 0;
  for (let row = 0; row < response.length; row++) {
    sum += weights[row] * countLogDensity(response[row], mean(linearPredictor[row]), theta);
  }
  return sum;
}
