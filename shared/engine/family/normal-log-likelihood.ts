/**
 * Log-likelihood of independent normal values of variance s^2 / weight, at the s^2 that maximises it, sum of weighted squares / n:
 * -n/2 [ln(2 pi s^2) + 1] + 1/2 sum ln weight. A perfect fit counts as s^2 of the smallest number there is.
 * Source: Seber & Lee (2003), Linear Regression Analysis, section 3.5.
 *
 * @param values one per row. around: their means. weights: prior weights, above zero.
 * @example normalLogLikelihood({ values, around, weights });
 */
export function normalLogLikelihood({ values, around, weights }: Record<"values" | "around" | "weights", Float64Array>): number {
  const count = values.length;
  let squares = 0;
  let logWeights = 0;
  for (let row = 0; row < count; row++) {
    const residual = values[row] - around[row];
    squares += weights[row] * residual * residual;
    if (weights[row] !== 1) logWeights += Math.log(weights[row]);
  }
  const variance = Math.max(squares / count, Number.MIN_VALUE);
  return -0.5 * count * (Math.log(2 * Math.PI) + Math.log(variance) + 1) + 0.5 * logWeights;
}
