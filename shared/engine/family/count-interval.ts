import betainc from "@stdlib/math-base-special-betainc";
import gammainc from "@stdlib/math-base-special-gammainc";
import { exponential } from "./exponential";
import type { Interval, RowUncertainty } from "./family-rules";
import { normalNodes } from "./normal-nodes";

/** Means beyond this are treated as continuous, by a lognormal of the same mean and variance. */
const largestCountMean = 1e9;

/**
 * Interval of a new count with the coefficients' uncertainty mixed in: quantiles of the mixture over
 * eta ~ N(linear predictor, standard error^2) of a negative binomial with mean mu and size mu / (dispersion - 1)
 * (variance dispersion x mu), a Poisson where the dispersion is 1 or less, and, for fractional units, a gamma with mean
 * mu and variance dispersion x mu. A count's ends are the smallest whole numbers that reach the two probabilities.
 * Source: McCullagh & Nelder (1989), section 6.2.3, for the negative binomial with constant dispersion.
 *
 * @example countInterval({ linearPredictor: 3, standardError: 0.1, dispersion: 2, level: 0.8, quantile: 1.28, fractional: false });
 */
export function countInterval(row: RowUncertainty): Interval {
  const mean = exponential(row.linearPredictor);
  const spread = Math.sqrt(mean * row.dispersion + (mean * row.standardError) ** 2) || Number.MIN_VALUE;
  if (!(mean < largestCountMean) || !(row.standardError < 10)) return lognormalInterval(row, mean);
  const distribution = mixtureOf(row);
  const tail = (1 - row.level) / 2;
  const find = row.fractional ? continuousQuantile : wholeQuantile;
  return {
    lower: find(distribution, tail, { near: mean, spread }),
    upper: find(distribution, 1 - tail, { near: mean, spread }),
  };
}

/** Same mean and variance; wide enough standard errors make any count distribution this. */
function lognormalInterval({ linearPredictor, standardError, dispersion, quantile }: RowUncertainty, mean: number): Interval {
  const half = quantile * Math.hypot(standardError, Math.sqrt(Math.log1p(dispersion / mean)));
  return { lower: exponential(linearPredictor - half), upper: exponential(linearPredictor + half) };
}

/** Probability of at most `value`. */
type Distribution = (value: number) => number;

function mixtureOf({ linearPredictor, standardError, dispersion, fractional }: RowUncertainty): Distribution {
  const parts = normalNodes.map(({ node, weight }) => ({ mean: exponential(linearPredictor + standardError * node), weight }));
  const single = fractional ? gammaBelow : countBelow;
  return (value) => {
    let total = 0;
    for (const { mean, weight } of parts) total += weight * single(value, mean, dispersion);
    return total;
  };
}

function countBelow(value: number, mean: number, dispersion: number): number {
  if (value < 0) return 0;
  // So close to Poisson, the negative binomial's size is beyond what its distribution function can tell from it.
  if (dispersion <= 1 + 1e-6) return gammainc(mean, value + 1, true, true);
  return betainc(1 / dispersion, mean / (dispersion - 1), value + 1);
}

function gammaBelow(value: number, mean: number, dispersion: number): number {
  if (value <= 0) return 0;
  if (!(dispersion > mean * 1e-14)) return value >= mean ? 1 : 0;
  return gammainc(value / dispersion, mean / dispersion, true, false);
}

type Around = { near: number; spread: number };

/** Smallest whole number whose probability reaches `wanted`. */
function wholeQuantile(distribution: Distribution, wanted: number, { near, spread }: Around): number {
  let step = Math.max(1, Math.round(spread / 2));
  let high = Math.max(0, Math.round(near));
  let low = high - step;
  while (distribution(high) < wanted && high < Number.MAX_SAFE_INTEGER) {
    low = high;
    high += step;
    step *= 2;
  }
  while (low >= 0 && distribution(low) >= wanted) {
    high = low;
    low -= step;
    step *= 2;
  }
  low = Math.max(low, -1);
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (distribution(middle) >= wanted) high = middle;
    else low = middle;
  }
  return high;
}

/** Bisection to twelve digits. */
function continuousQuantile(distribution: Distribution, wanted: number, { near, spread }: Around): number {
  let low = 0;
  let high = near + spread;
  for (let step = 0; step < 200 && distribution(high) < wanted; step++) {
    low = high;
    high = near + (high - near) * 2;
  }
  while (high - low > 1e-12 * high) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (distribution(middle) >= wanted) high = middle;
    else low = middle;
  }
  return high;
}
