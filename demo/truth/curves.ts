/**
 * A price curve on the log scale: the elasticity goes smoothly from one value at low prices to another at high
 * prices; where both are equal the curve is a straight line in log price.
 */
export type PriceCurve = {
  /** Price at which the curve is zero. */
  anchorPrice: number;
  elasticityBelow: number;
  elasticityAbove: number;
  /** Where the elasticity is half way between the two, as a ratio to the anchor price. */
  bendAt: number;
};

/** How quickly the elasticity changes around the bend, on the log price scale. */
const bendWidth = 0.08;

const logistic = (value: number) => 1 / (1 + Math.exp(-value));
const softplus = (value: number) => Math.max(value, 0) + Math.log1p(Math.exp(-Math.abs(value)));

/** Log effect of a price, zero at the anchor price; the integral of `elasticityAt` over log price. */
export function priceEffect(curve: PriceCurve, price: number): number {
  const { anchorPrice, elasticityBelow, elasticityAbove, bendAt } = curve;
  const logRatio = Math.log(price / anchorPrice);
  const bend = Math.log(bendAt);
  const turned = softplus((logRatio - bend) / bendWidth) - softplus(-bend / bendWidth);
  return elasticityBelow * logRatio + (elasticityAbove - elasticityBelow) * bendWidth * turned;
}

/** Slope of the log effect in log price. */
export function elasticityAt(curve: PriceCurve, price: number): number {
  const { anchorPrice, elasticityBelow, elasticityAbove, bendAt } = curve;
  const share = logistic((Math.log(price / anchorPrice) - Math.log(bendAt)) / bendWidth);
  return elasticityBelow + (elasticityAbove - elasticityBelow) * share;
}

/** One wave of a season curve: `timesAYear` crests of height `amplitude`, the first at year fraction `crest`. */
export type SeasonWave = { amplitude: number; crest: number; timesAYear: number };

/** Log effect of the time of year, a sum of waves: closed on the circle and zero on average over a year. */
export function seasonEffect(waves: readonly SeasonWave[], yearFraction: number): number {
  const heights = waves.map(
    ({ amplitude, crest, timesAYear }) => amplitude * Math.cos(2 * Math.PI * timesAYear * (yearFraction - crest)),
  );
  return heights.reduce((sum, height) => sum + height, 0);
}

/** Flat in the cold, then `perDegree` once it is warmer than `from`; negative where warmth costs sales. */
export type TemperatureCurve = { perDegree: number; from: number };

/** Degrees Celsius over which the temperature curve turns from flat to sloping. */
const turnWidthC = 2.5;

/** Temperature at which the effect is zero, in degrees Celsius. */
export const anchorTemperatureC = 10;

/** Log effect of a week's mean temperature, zero at the anchor temperature. */
export function temperatureEffect(curve: TemperatureCurve, temperatureC: number): number {
  const warmth = (value: number) => turnWidthC * softplus((value - curve.from) / turnWidthC);
  return curve.perDegree * (warmth(temperatureC) - warmth(anchorTemperatureC));
}
