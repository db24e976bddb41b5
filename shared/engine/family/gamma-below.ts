import gammaln from "@stdlib/math-base-special-gammaln";
import { logRatioExcess } from "./log-excess";

/** Tails below exp(-42) are nothing beside one. */
const negligible = 42;
/** From this shape on the uniform expansion has 14 digits near its centre, up to a square of 1, and beyond where there is little. */
const largeShape = 25;
const hugeShape = 100;

/**
 * Regularised incomplete gamma function P(shape, x): the probability that a gamma variable of this shape and scale 1 is below x.
 * Small shapes by the power series or, in the upper tail, by the continued fraction; large shapes by Temme's uniform expansion:
 * Q = 1/2 erfc(eta sqrt(a / 2)) + exp(-a eta^2 / 2) / sqrt(2 pi a) S(eta), with eta^2 / 2 = x / a - 1 - ln(x / a); the power
 * series S solves S' - a eta S = a (1 - eta / (lambda - 1) / Gamma*(a)).
 * Sources: Abramowitz & Stegun (1964), 6.5.29 and 6.5.31; Temme (1979), SIAM J. Math. Anal. 10, 757-766; Gil, Segura & Temme
 * (2012), SIAM J. Sci. Comput. 34, A2965-A2981.
 *
 * @param shape above 0.
 * @returns absolute error below 1e-13.
 * @example gammaBelow(1, 1); // 1 - exp(-1)
 */
export function gammaBelow(x: number, shape: number): number {
  if (!(x > 0)) return 0;
  const halfSquare = -logRatioExcess(x, shape);
  const square = shape * halfSquare;
  if (square > negligible && x > shape) return 1;
  const isExpanded = shape >= hugeShape || (shape >= largeShape && halfSquare <= 0.5);
  if (!isExpanded) return x < shape + 1 ? seriesBelow(x, shape) : 1 - fractionAbove(x, shape);
  if (square > negligible) return 0;
  const eta = Math.sign(x - shape) * Math.sqrt(2 * halfSquare);
  const above = normalAbove(eta, square) + (Math.exp(-square) / Math.sqrt(2 * Math.PI * shape)) * correction(eta, shape);
  return 1 - above;
}

/** x^a e^-x / Gamma(a + 1) (1 + x / (a + 1) + x^2 / ((a + 1) (a + 2)) + ...). */
function seriesBelow(x: number, shape: number): number {
  let term = 1;
  let sum = 1;
  for (let n = 1; term > 1e-17 * sum; n++) {
    term *= x / (shape + n);
    sum += term;
  }
  return sum * Math.exp(shape * Math.log(x) - x - gammaln(shape + 1));
}

/** x^a e^-x / Gamma(a) / (x + 1 - a - 1 (1 - a) / (x + 3 - a - ...)), evaluated forwards (Thompson & Barnett 1986). */
function fractionAbove(x: number, shape: number): number {
  let denominator = x + 1 - shape;
  let forward = 1 / denominator;
  let backward = 1e300;
  let value = forward;
  for (let n = 1; n < 1000; n++) {
    const numerator = n * (shape - n);
    denominator += 2;
    forward = 1 / (numerator * forward + denominator);
    backward = denominator + numerator / backward;
    const change = forward * backward;
    value *= change;
    if (Math.abs(change - 1) < 1e-16) break;
  }
  return value * Math.exp(shape * Math.log(x) - x - gammaln(shape));
}

/** 1/2 erfc(sign x sqrt(square)): erfc(z) is the incomplete gamma function of shape 1/2 at z^2. */
function normalAbove(sign: number, square: number): number {
  const tail = 0.5 * (square < 1.5 ? 1 - seriesBelow(square, 0.5) : fractionAbove(square, 0.5));
  return sign > 0 ? tail : 1 - tail;
}

const terms = 26;
/** eta / (lambda - 1) = sum of quotient[n] eta^n. */
const quotient = quotientSeries();

/** Coefficients follow from lambda' (lambda - 1) = eta lambda; the quotient is the reciprocal of (lambda - 1) / eta. */
function quotientSeries(): Float64Array {
  const excess = new Float64Array(terms + 2);
  excess[1] = 1;
  for (let n = 2; n <= terms + 1; n++) {
    let sum = excess[n - 1];
    for (let j = 2; j < n; j++) sum -= j * excess[j] * excess[n + 1 - j];
    excess[n] = sum / (n + 1);
  }
  const reciprocal = new Float64Array(terms + 1);
  reciprocal[0] = 1;
  for (let n = 1; n <= terms; n++) {
    for (let j = 1; j <= n; j++) reciprocal[n] -= excess[j + 1] * reciprocal[n - j];
  }
  return reciprocal;
}

/** S(eta): coefficients by backward recurrence b_(n-1) = quotient_n + (n + 1) / a x b_(n+1), over Gamma*(a) = 1 + b_1 / a. */
function correction(eta: number, shape: number): number {
  let [later, latest] = [0, 0];
  let sum = 0;
  for (let n = terms; n >= 1; n--) {
    const own = quotient[n] + ((n + 1) / shape) * later;
    later = latest;
    latest = own;
    sum = own + eta * sum;
  }
  // Here latest is b_0 and later b_1.
  return (sum * shape) / (shape + later);
}
