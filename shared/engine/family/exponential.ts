/** Linear predictors beyond this give the same mean (1e130): products of three stay finite. */
const largestExponent = 300;

/**
 * exp, kept finite and above zero, so that no prediction is NaN or infinite however far outside the data it is.
 *
 * @example exponential(0); // 1
 */
export const exponential = (exponent: number): number =>
  Math.exp(Math.min(largestExponent, Math.max(-largestExponent, exponent)));
