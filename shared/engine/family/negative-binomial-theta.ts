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
 * within a bracket that every step narrows. Counts no more scattered than Poisson's give the upper bound.
 * Source: Lawless (1987), Canadian J. Statist. 15, 209-225, with the mean's estimate held.
 *
 * @param rows responses, means (above zero) and weights, one per row; `start` is where the search begins.
 * @returns from 1e-3 to 1e7. O(n) a step, three or four steps from a near start.
 * @example estimateTheta({ response, mean, weights, start: 1 });
 */
export function estimateTheta(rows: ThetaRows): number {
  const tables = tablesFor(rows.response);
  let low = -Infinity;
  let high = Infinity;
  let logTheta = withinBounds(Math.log(rows.start > 0 ? rows.start : 1));
  for (let step = 0; step < mostSteps; step++) {
    const { slope, curvature } = logDerivatives(rows, Math.exp(logTheta), tables);
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

/** Derivatives that depend on theta and the count alone, one entry per count from 0. */
type Tables = { slope: Float64Array; curvature: Float64Array };

/** Null where responses are not whole, or reach so far that filling a table would cost more than it saves. */
function tablesFor(response: Float64Array): Tables | null {
  let most = 0;
  for (let row = 0; row < response.length; row++) {
    if (!Number.isInteger(response[row])) return null;
    most = Math.max(most, response[row]);
  }
  return most < response.length ? { slope: new Float64Array(most + 1), curvature: new Float64Array(most + 1) } : null;
}

/** First and second derivative of the log-likelihood by ln theta. */
function logDerivatives(rows: ThetaRows, theta: number, tables: Tables | null): { slope: number; curvature: number } {
  const { response, mean, weights } = rows;
  if (tables !== null) fillTables(tables, theta);
  let first = 0;
  let second = 0;
  for (let row = 0; row < response.length; row++) {
    const units = response[row];
    const change = (units - mean[row]) / (mean[row] + theta);
    // d/dtheta of (y + theta) ln((y + theta) / (mu + theta)) is ln(1 + change) - change.
    const excess = Math.abs(change) < 0.5 ? logExcess(change) : logOfRatio(units, mean[row], theta) - change;
    const slope = tables === null ? gammaRatioSlope(units, theta) : tables.slope[units];
    const curvature = tables === null ? gammaRatioCurvature(units, theta) : tables.curvature[units];
    first += weights[row] * (slope + excess);
    second += weights[row] * (curvature + (change * change) / (units + theta));
  }
  return { slope: theta * first, curvature: theta * first + theta * theta * second };
}

function fillTables({ slope, curvature }: Tables, theta: number): void {
  for (let units = 0; units < slope.length; units++) {
    slope[units] = gammaRatioSlope(units, theta);
    curvature[units] = gammaRatioCurvature(units, theta);
  }
}
