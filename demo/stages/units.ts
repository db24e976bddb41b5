import type { Random } from "../random";

type UnitsDraw = { mean: number; dispersion: number; soldByWeight: boolean; random: Random };

/**
 * Units sold of one row: a count, or a weight to the gram, with the mean given and a variance of `dispersion` times
 * the mean. Counts are negative binomial (a Poisson with a gamma mean), or Poisson where the dispersion is 1 or less.
 */
export function drawUnits({ mean, dispersion, soldByWeight, random }: UnitsDraw): number {
  if (soldByWeight) return Math.round(dispersion * random.gamma(mean / dispersion) * 1000) / 1000;
  if (dispersion <= 1) return random.poisson(mean);
  const excess = dispersion - 1;
  return random.poisson(excess * random.gamma(mean / excess));
}
