import type { FittedModel } from "../../engine";

/**
 * The variance of what is sold in one store-week around its expected value. Noise is taken as independent from store-week
 * to store-week, with the model's dispersion: quasi-Poisson dispersion x mean (at least the mean where units are whole, as the
 * engine's observation intervals have it), log-gaussian mean^2 x (exp(dispersion) - 1). What a week shares across stores and
 * what persists in a store is not in it: where there is much of either, intervals of large totals come out too narrow.
 *
 * @param mean expected units.
 * @example noiseVariance(model, 100) // 250 at a dispersion of 2.5
 */
export function noiseVariance(model: FittedModel, mean: number): number {
  const { dispersion, fractionalResponse } = model;
  if (model.spec.family === "log-gaussian") return mean * mean * Math.expm1(dispersion);
  return (fractionalResponse ? dispersion : Math.max(1, dispersion)) * mean;
}
