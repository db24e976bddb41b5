import type { ThetaRows } from "./family-rules";
import { gammaRatioCurvature, gammaRatioSlope, logOfRatio } from "./gamma-ratio";
import { logExcess } from "./log-excess";

const [smallest, largest] = [1e-3, 1e7];
const mostSteps = 100;
const tolerance = 1e-11;
/** No step multiplies theta by more than e^2. */
const longestStep = 2;

/**
 * Theta of the negative binomial (variance mean + mean^2 / theta) by maximum likelihood given the means: Newton on ln theta,
 * within a bracket that every step narrows. Counts no more scattered
 * than Poisson's give the upper bound.
 * Source: Lawless (1987), Canadian J. Statist. 15, 209-225, with the mean's estimate held.
 *
 * @param rows responses, means (above zero) and weights, one per row; `start` is where the search begins.
 * @returns from 1e-3 to 1e7. O(n) a step, three or four steps from a near start.
 * @example estimateTheta({ response, mean, weights, start: 1 });
 */
export function estimateTheta(rows: ThetaRows): number {
  let low = -Infinity;
  let high = Infinity;
  let logTheta = withinBounds(Math.log(rows.start > 0 ? rows.start : 1));
  for (let step = 0; step < mostSteps; step++) {
    const { slope, curvature } = logDerivatives(rows, Math.exp(logTheta));
    if (slope > 0) low = logTheta;
    else high = logTheta;
    // Newton's step where the likelihood is concave, else a long one uphill.
    const move = curvature < 0 ? -slope / curvature : Math.sign(slope) * longestStep;
    let next = withinBounds(logTheta + Math.max(-longestStep, Math.min(longestStep, move)));
    if (!(Math.abs(next - logTheta) > tolerance)) break;
    if (!(next > low && next < high)) next = (low + high) / 2;
    logTheta = next;
  }
  return Math.exp(logTheta);
}

const withinBounds = (logTheta: number): number => Math.min(Math.log(largest), Math.max(Math.log(smallest), logTheta));

/** First and second derivative of the log-likelihood by ln theta. */
function logDerivatives({ response, mean, weights }: ThetaRows, theta: number): { slope: number; curvature: number } {
  let first = 0;
  let second = 0;
  for (let row = 0; row < response.length; row++) {
    const units = response[row];
    const change = (units - mean[row]) / (mean[row] + theta);
    // d/dtheta of (y + theta) ln((y + theta) / (mu + theta)) is ln(1 + change) - change.
    const excess = Math.abs(change) < 0.02 ? logExcess(change) : logOfRatio(units, mean[row], theta) - change;
    first += weights[row] * (gammaRatioSlope(units, theta) + excess);
    second += weights[row] * (gammaRatioCurvature(units, theta) + (change * change) / (units + theta));
  }
  return { slope: theta * first, curvature: theta * first + theta * theta * second };
}
