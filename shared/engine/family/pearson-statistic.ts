import type { MeanRows } from "./family-rules";

/**
 * Pearson's statistic: sum of weight x (response - mean)^2 / variance(mean).
 * Source: McCullagh & Nelder (1989), Generalized Linear Models, section 2.3.
 *
 * @param variance of a row of weight 1 at a mean.
 * @example pearsonStatistic((mean) => mean)({ response, mean, weights, theta: 1 });
 */
export const pearsonStatistic = (variance: (mean: number, theta: number) => number) =>
  ({ response, mean, weights, theta }: MeanRows): number => {
    let sum = 0;
    for (let row = 0; row < response.length; row++) {
      const residual = response[row] - mean[row];
      sum += (weights[row] * residual * residual) / variance(mean[row], theta);
    }
    return sum;
  };
