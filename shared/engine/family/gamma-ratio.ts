import digamma from "@stdlib/math-base-special-digamma";
import gammaln from "@stdlib/math-base-special-gammaln";
import trigamma from "@stdlib/math-base-special-trigamma";

/** From here on the asymptotic series reach rounding, and differences of the functions themselves begin to lose digits. */
const large = 30;

/**
 * ln[Gamma(y + theta) / Gamma(theta)] + theta ln theta - (y + theta) ln(y + theta): the part of the negative binomial's
 * log-likelihood that does not know the mean. Absolute error about 1e-14 x (1 + y), however large theta is.
 * Source: Stirling's series, Abramowitz & Stegun (1964), 6.1.41.
 *
 * @example gammaRatio(0, 5); // 0
 */
export function gammaRatio(units: number, theta: number): number {
  const sum = units + theta;
  if (theta >= large) return stirlingRest(sum) - stirlingRest(theta) - units - 0.5 * Math.log1p(units / theta);
  return gammaln(sum) - gammaln(theta) + theta * Math.log(theta) - sum * Math.log(sum);
}

/** ln Gamma(x) less (x - 1/2) ln x - x + 1/2 ln 2 pi. */
function stirlingRest(x: number): number {
  const inverse = 1 / x;
  const square = inverse * inverse;
  return inverse * (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square * (1 / 1680 - square / 1188))));
}

/**
 * digamma(y + theta) - digamma(theta) - ln(1 + y / theta): first derivative of `gammaRatio` by theta, as precise.
 * Source: Abramowitz & Stegun (1964), 6.3.18.
 *
 * @example gammaRatioSlope(3, 1e6); // 1.5e-12
 */
export function gammaRatioSlope(units: number, theta: number): number {
  const sum = units + theta;
  if (theta < large) return digamma(sum) - digamma(theta) - Math.log1p(units / theta);
  // 1 / (2 theta) - 1 / (2 sum), without the cancellation, then the rest of the series.
  return units / (2 * theta * sum) + digammaRest(theta) - digammaRest(sum);
}

/** ln x - 1 / (2 x) - digamma(x). */
function digammaRest(x: number): number {
  const square = 1 / (x * x);
  return square * (1 / 12 - square * (1 / 120 - square * (1 / 252 - square * (1 / 240 - square / 132))));
}

/**
 * ln((y + theta) / (mu + theta)), to rounding where theta dwarfs both, finite where it is dwarfed.
 *
 * @example logOfRatio(3, 3, 5); // 0
 */
export function logOfRatio(units: number, mean: number, theta: number): number {
  const change = (units - mean) / (mean + theta);
  return change > -0.5 ? Math.log1p(change) : Math.log((units + theta) / (mean + theta));
}

/**
 * trigamma(y + theta) - trigamma(theta) - 1 / (y + theta) + 1 / theta: the second derivative.
 *
 * @example gammaRatioCurvature(0, 5); // 0
 */
export function gammaRatioCurvature(units: number, theta: number): number {
  const sum = units + theta;
  if (theta < large) return trigamma(sum) - trigamma(theta) + units / (theta * sum);
  const rest = (x: number) => 1 / (2 * x * x) + 1 / (6 * x * x * x);
  return rest(sum) - rest(theta);
}
