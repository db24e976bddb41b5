import betainc from "@stdlib/math-base-special-betainc";
import gammaln from "@stdlib/math-base-special-gammaln";
import { EngineError } from "../errors";
import { betweenQuantile } from "./between-quantile";
import type { IterativeRules, LikelihoodRows, WorkingRows } from "./family-rules";
import { nullMean } from "./null-mean";
import { pearsonStatistic } from "./pearson-statistic";

/** Probabilities stay within 1e-13 of 0 and 1, so that a row whose answer is certain keeps a weight above zero. */
const largestLogit = 30;

const mean = (linearPredictor: number): number =>
  1 / (1 + Math.exp(-Math.min(largestLogit, Math.max(-largestLogit, linearPredictor))));
const variance = (mu: number): number => mu * (1 - mu);

/**
 * A share from 0 to 1 of a number of trials (the weights, 1 by default), logit link.
 * Source: McCullagh & Nelder (1989), Generalized Linear Models, sections 4.3 and 4.4.
 */
export const binomial: IterativeRules = {
  fitting: "iterative",
  scale: "known",
  check: checkShares,
  checkValues: checkShares,
  start: ({ response, weights }) => response.map((share, row) => {
    const successes = weights[row] * share + 0.5;
    return Math.log(successes / (weights[row] + 1 - successes));
  }),
  mean,
  median: null,
  logLikelihood,
  variance,
  unitDeviance: (response, mu) => Math.max(0, 2 * (shareOf(response, mu) + shareOf(1 - response, 1 - mu))),
  working: fillWorking,
  pearson: pearsonStatistic(variance),
  nullMean(rows) {
    let successes = 0.5;
    let trials = 1;
    for (let row = 0; row < rows.response.length; row++) {
      successes += rows.weights[row] * rows.response[row];
      trials += rows.weights[row];
    }
    return nullMean({ mean, working: fillWorking }, rows, Math.log(successes / (trials - successes)));
  },
  estimateTheta: null,
  meanInterval({ linearPredictor, standardError, quantile }) {
    const half = quantile * standardError;
    return { lower: mean(linearPredictor - half), upper: mean(linearPredictor + half) };
  },
  observationInterval: null,
  quantileResidual({ response, linearPredictor, weight }, uniform) {
    const successes = weight * response;
    const mu = mean(linearPredictor);
    return betweenQuantile({ below: sharesAtMost(successes - 1, weight, mu), atMost: sharesAtMost(successes, weight, mu) }, uniform);
  },
};

/** Probability of at most so many successes; the beta function carries on where they are not whole. */
function sharesAtMost(successes: number, trials: number, mu: number): number {
  if (successes <= -1) return 0;
  return successes >= trials ? 1 : betainc(1 - mu, trials - successes, successes + 1);
}

function checkShares(response: Float64Array, column: string): void {
  for (let row = 0; row < response.length; row++) {
    if (!(response[row] >= 0 && response[row] <= 1)) {
      throw new EngineError(
        "response-invalid",
        `Response "${column}" must be from 0 to 1 for binomial; row ${row + 1} is ${response[row]}.`,
      );
    }
  }
}

const shareOf = (share: number, mu: number): number => (share > 0 ? share * Math.log(share / mu) : 0);

/** Working response eta - offset + (y - mu) / (mu (1 - mu)), working weight n mu (1 - mu). */
function fillWorking(rows: WorkingRows): void {
  const { response, offset, weights, linearPredictor, mean: means, workingResponse, workingWeights } = rows;
  for (let row = 0; row < response.length; row++) {
    const spread = variance(means[row]);
    workingResponse[row] = linearPredictor[row] - offset[row] + (response[row] - means[row]) / spread;
    workingWeights[row] = weights[row] * spread;
  }
}

/** Sum of ln C(n, n y) + n y ln mu + n (1 - y) ln(1 - mu); gamma functions carry on where n y is not whole. */
function logLikelihood({ response, linearPredictor, weights }: LikelihoodRows): number {
  let sum = 0;
  for (let row = 0; row < response.length; row++) {
    const trials = weights[row];
    const successes = trials * response[row];
    const failures = trials - successes;
    const mu = mean(linearPredictor[row]);
    sum += gammaln(trials + 1) - gammaln(successes + 1) - gammaln(failures + 1) + successes * Math.log(mu) + failures * Math.log1p(-mu);
  }
  return sum;
}
