import { EngineError } from "../errors";

/** Weights w_k and degrees of freedom d_k of Q = sum_k w_k chi2(d_k), the chi-squares independent. */
export type WeightedChiSquare = { weights: readonly number[]; degrees: readonly number[] };

/** Angle of the path's far ends from the real axis: exp(-s x) then dies out for every x, and so do the factors. */
const endAngle = (3 * Math.PI) / 8;
/** Vertex radius in widths of the saddle: the path leaves the vertical where the integrand has all but gone. */
const radiusInWidths = 3;
const firstStep = 0.1;
const mostHalvings = 7;
/** Integrand below this share of its largest value is left out. */
const negligible = 1e-17;
const agreement = 1e-12;

/**
 * P(sum_k w_k chi2(d_k) > x) for weights of either sign and degrees of freedom that need not be whole. Imhof's integral
 * 1 / (2 pi i) int M(s) exp(-s x) / s ds, M(s) = prod_k (1 - 2 w_k s)^(-d_k / 2), taken not along the imaginary axis but
 * along a hyperbola through its saddle point, where the trapezoidal rule converges geometrically. Relative accuracy 1e-10,
 * in the tails too.
 * Sources: Imhof (1961), Biometrika 48, 419-426, section 2 (the integral); Daniels (1954), Ann. Math. Statist. 25, 631-650,
 * section 2 (the saddle point); Weideman & Trefethen (2007), Math. Comp. 76, 1341-1356 (hyperbolas).
 *
 * @throws EngineError option-invalid for numbers that are not finite, or degrees of freedom not above 0.
 * Cost: at most about 20,000 evaluations of M, usually a few hundred.
 * @example weightedChiSquareTail({ weights: [1], degrees: [1] }, 3.841459); // 0.05
 */
export function weightedChiSquareTail(mixture: WeightedChiSquare, x: number): number {
  check(mixture, x);
  const kept = mixture.weights.flatMap((weight, k) => (weight === 0 ? [] : [k]));
  const weights = kept.map((k) => mixture.weights[k]);
  const degrees = kept.map((k) => mixture.degrees[k]);
  const largest = weights.reduce((most, weight) => Math.max(most, weight), 0);
  const smallest = weights.reduce((least, weight) => Math.min(least, weight), 0);
  if (largest === 0 && x >= 0) return 0;
  if (smallest === 0 && x <= 0) return kept.length === 0 && x === 0 ? 0 : 1;
  const isFlipped = largest === 0 || x < 0;
  const sign = isFlipped ? -1 : 1;
  const scale = isFlipped ? -smallest : largest;
  const upper = positiveTail({ weights: weights.map((weight) => (sign * weight) / scale), degrees }, (sign * x) / scale);
  return isFlipped ? 1 - upper : upper;
}

/**
 * P(chi2(degrees) > x), as `weightedChiSquareTail`.
 *
 * @example chiSquareTail(5.991465, 2); // 0.05
 */
export const chiSquareTail = (x: number, degrees: number): number => weightedChiSquareTail({ weights: [1], degrees: [degrees] }, x);

/**
 * P(F(numerator, denominator) > x): that of numerator's chi-square less x numerator / denominator times the other's.
 *
 * @example fTail(4, 1, 20); // 0.0593
 */
export const fTail = (x: number, numerator: number, denominator: number): number =>
  (x <= 0 ? 1 : weightedChiSquareTail({ weights: [1, (-x * numerator) / denominator], degrees: [numerator, denominator] }, 0));

function check({ weights, degrees }: WeightedChiSquare, x: number): void {
  if (weights.length !== degrees.length) {
    throw new EngineError(
      "option-invalid", `A mixture has ${weights.length} weights and ${degrees.length} degrees of freedom; it needs as many of both.`,
    );
  }
  const bad = [...weights, ...degrees, x].find((value) => !Number.isFinite(value));
  if (bad !== undefined) throw new EngineError("option-invalid", `A mixture of chi-squares has the number ${bad}; all must be finite.`);
  const low = degrees.find((value) => value <= 0);
  if (low !== undefined) throw new EngineError("option-invalid", `A chi-square has ${low} degrees of freedom; it needs more than 0.`);
}

/** For x >= 0 and a largest weight of 1: the integrand has its pole at 0 and is cut from 1/2 to the right. */
function positiveTail(mixture: WeightedChiSquare, x: number): number {
  const saddle = saddlePoint(mixture, x);
  const peak = logIntegrand(mixture, x, { real: saddle, imaginary: 0 }).real;
  const width = 1 / Math.sqrt(curvature(mixture, saddle));
  // Moved by a quarter turn the path must still pass right of the pole, and by the end angle left of the cut.
  const radius = Math.min(radiusInWidths * width, (0.9 * saddle) / Math.cos(endAngle), (0.9 * (0.5 - saddle)) / (1 - Math.cos(endAngle)));
  const at = { mixture, x, saddle, peak, radius };
  let step = firstStep;
  let sum = nodes(at, 0, step);
  for (let halving = 0; halving < mostHalvings; halving++) {
    const finer = (sum + nodes(at, step / 2, step)) / 2;
    const isSettled = Math.abs(finer - sum) <= agreement * Math.abs(finer);
    sum = finer;
    step /= 2;
    if (isSettled) break;
  }
  return Math.min(1, Math.max(0, (sum * Math.exp(peak)) / Math.PI));
}

type Path = { mixture: WeightedChiSquare; x: number; saddle: number; peak: number; radius: number };

/** Step x the sum of Im(integrand x ds/dt) at t = from, from + step, ..., the node at t = 0 by half. */
function nodes(path: Path, from: number, step: number): number {
  const { mixture, x, saddle, peak, radius } = path;
  const across = radius * Math.cos(endAngle);
  const along = radius * Math.sin(endAngle);
  let sum = 0;
  let largest = 0;
  for (let t = from; t < 700; t += step) {
    const point = { real: saddle + across * (Math.cosh(t) - 1), imaginary: along * Math.sinh(t) };
    const log = logIntegrand(mixture, x, point);
    const size = Math.exp(log.real - peak);
    const value = size * (Math.cos(log.imaginary) * along * Math.cosh(t) + Math.sin(log.imaginary) * across * Math.sinh(t));
    sum += t === 0 ? value / 2 : value;
    const magnitude = size * radius * Math.cosh(t);
    largest = Math.max(largest, magnitude);
    if (magnitude < negligible * largest) break;
  }
  return step * sum;
}

/** ln of M(s) exp(-s x) / s off the real axis above, by its principal value. */
function logIntegrand({ weights, degrees }: WeightedChiSquare, x: number, s: { real: number; imaginary: number }) {
  let real = -x * s.real - 0.5 * Math.log(s.real * s.real + s.imaginary * s.imaginary);
  let imaginary = -x * s.imaginary - Math.atan2(s.imaginary, s.real);
  for (let k = 0; k < weights.length; k++) {
    const left = 1 - 2 * weights[k] * s.real;
    const up = -2 * weights[k] * s.imaginary;
    real -= (degrees[k] / 4) * Math.log(left * left + up * up);
    imaginary -= (degrees[k] / 2) * Math.atan2(up, left);
  }
  return { real, imaginary };
}

/** Where the integrand is least on (0, 1/2): its logarithm is convex there, and bisection is sure. */
function saddlePoint({ weights, degrees }: WeightedChiSquare, x: number): number {
  let low = 0;
  let high = 0.5;
  // Near either end, relative to the distance from that end: 200 halvings reach 1e-60.
  for (let turn = 0; turn < 200 && high - low > 1e-6 * Math.min(low, 0.5 - high); turn++) {
    const s = (low + high) / 2;
    if (s === low || s === high) break;
    let slope = -x - 1 / s;
    for (let k = 0; k < weights.length; k++) slope += (degrees[k] * weights[k]) / (1 - 2 * weights[k] * s);
    if (slope < 0) low = s;
    else high = s;
  }
  return (low + high) / 2;
}

function curvature({ weights, degrees }: WeightedChiSquare, s: number): number {
  let sum = 1 / (s * s);
  for (let k = 0; k < weights.length; k++) {
    const left = 1 - 2 * weights[k] * s;
    sum += (2 * degrees[k] * weights[k] * weights[k]) / (left * left);
  }
  return sum;
}
