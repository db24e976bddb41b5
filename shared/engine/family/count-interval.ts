import { amountQuantiles } from "./amount-quantile";
import { countQuantiles } from "./count-mixture";
import { exponential } from "./exponential";
import type { Interval, RowUncertainty } from "./family-rules";
import { mixtureNodes } from "./mixture-nodes";

/** Means beyond this, and ends beyond the other, are treated as continuous, by a lognormal of the same mean and variance. */
const largestCountMean = 1e9;
const largestCountEnd = 1e15;

/**
 * Interval of a new count with the coefficients' uncertainty mixed in: quantiles of the mixture over
 * eta ~ N(linear predictor, standard error^2) of a negative binomial with mean mu and variance ratio x mu, a Poisson where the
 * ratio is 1 or less, and, for fractional units, a gamma with that mean and variance. A count's ends are the smallest whole
 * numbers that reach the two probabilities. Source: McCullagh & Nelder (1989), section 6.2.3.
 *
 * @param ratioOf variance over mean at a mean: the dispersion (quasi-Poisson), 1 + mu / theta (negative binomial).
 * @returns about 10 microseconds for means below some hundred units, 100 beyond.
 * @example countInterval({ linearPredictor: 3, standardError: 0.1, level: 0.8, quantile: 1.28, fractional: false }, () => 2);
 */
export function countInterval(row: Omit<RowUncertainty, "dispersion" | "theta">, ratioOf: (mean: number) => number): Interval {
  const mean = exponential(row.linearPredictor);
  const ratio = ratioOf(mean);
  const wide = lognormalInterval(row, ratio / mean);
  if (!(mean < largestCountMean) || !(row.standardError < 10) || !(wide.upper < largestCountEnd)) return wide;
  const nodes = mixtureNodes(row, ratioOf);
  const tail = (1 - row.level) / 2;
  const guesses = row.standardError ** 2 < ratio / mean ? gammaInterval(row, ratio / mean) : wide;
  const lower = { wanted: tail, guess: guesses.lower };
  const upper = { wanted: 1 - tail, guess: guesses.upper };
  return row.fractional ? amountQuantiles(nodes, { lower, upper }) : countQuantiles(nodes, { lower, upper });
}

type Width = Pick<RowUncertainty, "linearPredictor" | "standardError" | "quantile">;

/** Same mean and squared variation; wide enough standard errors make any count distribution this. */
function lognormalInterval({ linearPredictor, standardError, quantile }: Width, squaredVariation: number): Interval {
  const half = quantile * Math.hypot(standardError, Math.sqrt(Math.log1p(squaredVariation)));
  return { lower: exponential(linearPredictor - half), upper: exponential(linearPredictor + half) };
}

/** A gamma of the mixture's mean and variance, by the cube root's normal approximation (Wilson & Hilferty 1931). */
function gammaInterval({ linearPredictor, standardError, quantile }: Width, squaredVariation: number): Interval {
  const mean = exponential(linearPredictor + standardError ** 2 / 2);
  const ninth = (squaredVariation + standardError ** 2) / 9;
  const end = (normal: number) => mean * Math.max(0.01, 1 - ninth + normal * Math.sqrt(ninth)) ** 3;
  return { lower: end(-quantile), upper: end(quantile) };
}
