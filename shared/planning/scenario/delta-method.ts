import { covarianceQuadratic } from "../../engine";
import type { FittedModel } from "../../engine";
import { varianceOfSum, withKnown } from "../sum-over-stores";
import type { Interval } from "./scenario";

/** A factor times a gradient; several of them add up to the gradient of what is estimated. */
export type GradientPart = { factor: number; gradient: Float64Array | undefined };

/**
 * The variance of a quantity by the delta method: g'Vg of every store, g the sum of the parts, V the covariance of the
 * store's coefficients, added up over stores as `varianceOfSum` does. What two parts share cancels before it is squared.
 *
 * @param partsOf the parts of each store's gradient; undefined gradients count as zero.
 * @example varianceOver(stores, (store) => [{ factor: 1 / total, gradient: store.plan.totalGradient }])
 */
export function varianceOver<Store extends { model: FittedModel }>(
  stores: readonly Store[], partsOf: (store: Store) => GradientPart[],
): number {
  return varianceOfSum(stores.map((store) => {
    const gradient = new Float64Array(store.model.coefficients.length);
    for (const part of partsOf(store)) {
      if (part.gradient === undefined) continue;
      for (let index = 0; index < gradient.length; index++) gradient[index] += part.factor * part.gradient[index];
    }
    return withKnown(store.model, (model) => covarianceQuadratic(model, gradient, gradient));
  }));
}

/**
 * The interval of a ratio whose logarithm is normal: exp(log +- z x standard deviation).
 *
 * @param z half the width in standard deviations, from `normalQuantile(level)`.
 * @example ratioInterval({ log: 0, variance: 0, z: 1.28 }) // { estimate: 1, lower: 1, upper: 1 }
 */
export function ratioInterval({ log, variance, z }: { log: number; variance: number; z: number }): Interval {
  const half = z * Math.sqrt(variance);
  return { estimate: Math.exp(log), lower: Math.exp(log - half), upper: Math.exp(log + half) };
}

/**
 * The interval of a positive total as a lognormal matched in mean and variance: s^2 = ln(1 + variance / mean^2), median
 * mean x exp(-s^2 / 2).
 *
 * @example lognormalInterval({ mean: 100, variance: 0, z: 1.28 }) // { estimate: 100, lower: 100, upper: 100 }
 */
export function lognormalInterval({ mean, variance, z }: { mean: number; variance: number; z: number }): Interval {
  if (!(mean > 0)) return { estimate: mean, lower: mean, upper: mean };
  const logVariance = Math.log1p(variance / (mean * mean));
  const logMedian = Math.log(mean) - logVariance / 2;
  const half = z * Math.sqrt(logVariance);
  return { estimate: mean, lower: Math.exp(logMedian - half), upper: Math.exp(logMedian + half) };
}
