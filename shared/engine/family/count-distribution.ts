import betainc from "@stdlib/math-base-special-betainc";
import gammaln from "@stdlib/math-base-special-gammaln";
import { gammaBelow } from "./gamma-below";
import { gammaRatio, logOfRatio } from "./gamma-ratio";

/** A variance over mean this near to 1 is Poisson's: the negative binomial's size is beyond what its functions can tell from it. */
const nearPoisson = 1 + 1e-6;

/**
 * Size of the negative binomial with this mean and ratio of variance to mean; Infinity (Poisson) for a ratio of 1 or less.
 *
 * @example countSize(6, 3); // 3
 */
export const countSize = (mean: number, ratio: number): number => (ratio <= nearPoisson ? Infinity : mean / (ratio - 1));

/**
 * Probability that a count is at most `value`: negative binomial with `mean` and variance `ratio` x `mean`, Poisson where the
 * ratio is 1 or less. Source: McCullagh & Nelder (1989), section 6.2.3.
 *
 * @param value a whole number; below 0 the probability is 0.
 * @example countAtMost(0, 2, 1); // exp(-2)
 */
export function countAtMost(value: number, mean: number, ratio: number): number {
  if (value < 0) return 0;
  if (ratio <= nearPoisson) return 1 - gammaBelow(mean, value + 1);
  return betainc(1 / ratio, mean / (ratio - 1), value + 1);
}

/**
 * Logarithm of the negative binomial's probability of `count` (which need not be whole), in differences that keep their digits
 * however large `size` is; Poisson for a size of Infinity.
 * ln Gamma(y + s) - ln Gamma(s) - ln y! + s ln s + y ln mu - (y + s) ln(mu + s).
 *
 * @example countLogDensity(0, 2, Infinity); // -2
 */
export function countLogDensity(count: number, mean: number, size: number): number {
  const own = (count > 0 ? count * Math.log(mean) : 0) - gammaln(count + 1);
  if (size === Infinity) return own - mean;
  return own + gammaRatio(count, size) + (count + size) * logOfRatio(count, mean, size);
}

/**
 * Probability that an amount is at most `value`: gamma with `mean` and variance `ratio` x `mean`; all of it at the mean where
 * the ratio is nothing beside it.
 *
 * @example amountAtMost(2, 2, 1e-20); // 1
 */
export function amountAtMost(value: number, mean: number, ratio: number): number {
  if (value <= 0) return 0;
  if (!(ratio > mean * 1e-14)) return value >= mean ? 1 : 0;
  return gammaBelow(value / ratio, mean / ratio);
}

/**
 * Chernoff's bound: logarithm of a number that the probability of being `count` or further from the mean (on its side) does not
 * exceed; minus half the unit deviance. Source: Chernoff (1952), Ann. Math. Statist. 23, 493-507.
 *
 * @example logTailBound(4, 4, 2); // 0
 */
export function logTailBound(count: number, mean: number, size: number): number {
  const own = count > 0 ? count * Math.log(count / mean) : 0;
  return size === Infinity ? count - mean - own : (count + size) * logOfRatio(count, mean, size) - own;
}
