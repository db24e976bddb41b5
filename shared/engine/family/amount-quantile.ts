import gammaln from "@stdlib/math-base-special-gammaln";
import { amountAtMost } from "./count-distribution";
import type { End } from "./count-mixture";
import { logRatioExcess } from "./log-excess";
import { mostNodes } from "./mixture-nodes";
import type { MixtureNodes } from "./mixture-nodes";

const mostSteps = 400;
/** Of the log of the noise's spread; Newton's error is about its square. */
const tolerance = 1e-6;
/** Below exp(-700) an amount is nothing. */
const [smallestLog, largestLog] = [-700, 700];

/**
 * Quantiles of a mixture of gammas, by Newton's method on the logarithm of the nearer tail against ln x, in which both tails
 * are close to straight, within a bracket; halving where a step leaves it. Relative error about 1e-12.
 *
 * @param nodes means, ratios of variance to mean, weights.
 * @returns one amount per end.
 * @example amountQuantiles(nodes, [{ wanted: 0.1, guess: 3 }, { wanted: 0.9, guess: 9 }]);
 */
export function amountQuantiles(nodes: MixtureNodes, ends: readonly End[]): number[] {
  // ln(x density) = constant - shape (x / mean - 1 - ln(x / mean)).
  for (let j = 0; j < nodes.count; j++) {
    const shape = nodes.means[j] / nodes.ratios[j];
    constants[j] = shape * Math.log(shape) - shape - gammaln(shape);
  }
  return ends.map((end) => search(nodes, end));
}

const constants = new Float64Array(mostNodes);

function search(nodes: MixtureNodes, { wanted, guess }: End): number {
  const middle = nodes.count >> 1;
  const closeEnough = tolerance * Math.min(1, Math.sqrt(nodes.ratios[middle] / nodes.means[middle]));
  let low = smallestLog;
  let high = largestLog;
  let logX = Math.min(high, Math.max(low, Math.log(guess)));
  for (let step = 0; step < mostSteps && high - low > 1e-13; step++) {
    const { below, slope } = at(nodes, Math.exp(logX));
    if (below >= wanted) high = logX;
    else low = logX;
    const move = wanted < 0.5
      ? (Math.log(wanted / below) * below) / slope
      : (Math.log((1 - below) / (1 - wanted)) * (1 - below)) / slope;
    // Every sixth step halves the bracket, whatever Newton says: far out it can creep.
    const next = step % 6 === 5 ? Number.NaN : logX + move;
    if (Math.abs(move) < closeEnough) return Math.exp(logX + move);
    logX = next > low && next < high ? next : (low + high) / 2;
  }
  return high <= smallestLog ? 0 : Math.exp(high);
}

/** Probability below x and its derivative by ln x. */
function at({ count, means, ratios, weights }: MixtureNodes, x: number): { below: number; slope: number } {
  let below = 0;
  let slope = 0;
  for (let j = 0; j < count; j++) {
    below += weights[j] * amountAtMost(x, means[j], ratios[j]);
    slope += weights[j] * Math.exp(constants[j] + (means[j] / ratios[j]) * logRatioExcess(x, means[j]));
  }
  return { below, slope };
}
