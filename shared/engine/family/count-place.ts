import { amountAtMost, countAtMost } from "./count-distribution";

/** Amounts are recorded to a thousandth, so that a zero stands for anything that rounds to it. */
const roundsToZero = 5e-4;

/**
 * Where a response stands in the predictive distribution of counts (negative binomial or Poisson) or, for fractional units,
 * of amounts (gamma): the probability below it, and at most it. A fractional zero stands between nothing and half a thousandth.
 *
 * @param ratio variance over mean.
 * @example countPlace({ response: 0, mean: 1, ratio: 1, fractional: false }); // below 0, at most exp(-1)
 */
export function countPlace(
  { response, mean, ratio, fractional }: { response: number; mean: number; ratio: number; fractional: boolean },
): { below: number; atMost: number } {
  if (!fractional) {
    return { below: countAtMost(Math.ceil(response) - 1, mean, ratio), atMost: countAtMost(Math.floor(response), mean, ratio) };
  }
  if (response === 0) return { below: 0, atMost: amountAtMost(roundsToZero, mean, ratio) };
  const atMost = amountAtMost(response, mean, ratio);
  return { below: atMost, atMost };
}
