import type { LocalRegressionBasis } from "../types";

/** Distinct points of the window around x that have weight: from `start` to `end` (not included), and half its width. */
export type Window = { start: number; end: number; reach: number };

/** Per point of a window: place u = (x_k - x) / reach, weight, and the orthogonal polynomials of degree 1 and 2 there. */
export type WindowRoom = Record<"place" | "weight" | "line" | "bend", Float64Array>;

/** @param points as many as a window can hold. */
export const roomForWindow = (points: number): WindowRoom => ({
  place: new Float64Array(points), weight: new Float64Array(points), line: new Float64Array(points), bend: new Float64Array(points),
});

/**
 * A polynomial has its digits where its squared norm is this many times that of its rounding: six of them. With fewer, the
 * window's points are too few different values for it.
 */
const leastNorm = 1e12 * Number.EPSILON ** 2;

/**
 * Writes the local polynomial's value and slope at x as combinations of the points, by polynomials orthogonal over the window
 * (Forsythe 1957): value_k = w_k sum_j p_j(0) p_j(u_k) / |p_j|^2. Each is made orthogonal twice, so that values sum to one and
 * slopes to zero however uneven the points are; one that points nearly on top of each other leave no digits is left out.
 *
 * @param to.value overwritten within the window. to.slope likewise.
 * Cost: O(points of the window).
 * @example writeLocal(basis, { x, window: windowAt(basis, x), value, slope, room: roomForWindow(basis.at.length) });
 */
export function writeLocal(
  basis: LocalRegressionBasis,
  to: { x: number; window: Window; value: Float64Array; slope: Float64Array; room: WindowRoom },
): void {
  const { window: { start, end, reach }, value, slope, room: { weight, line, bend } } = to;
  const count = end - start;
  const total = placePoints(basis, to);
  for (let k = 0; k < count; k++) {
    value[start + k] = weight[k] / total;
    slope[start + k] = 0;
  }
  const first = basis.degree >= 1 && count > 1 ? writeLine(to.room, count, total) : null;
  if (first === null) return;
  for (let k = 0; k < count; k++) {
    const share = (weight[k] * line[k]) / first.norm;
    value[start + k] += first.atZero * share;
    slope[start + k] += share / reach;
  }
  const second = basis.degree === 2 && count > 2 ? writeBend(to.room, { count, total, first }) : null;
  if (second === null) return;
  for (let k = 0; k < count; k++) {
    const share = (weight[k] * bend[k]) / second.norm;
    value[start + k] += second.atZero * share;
    slope[start + k] += (second.slope * share) / reach;
  }
}

/** Places and tricube weights; returns their total weight. */
function placePoints(
  { at, weights }: LocalRegressionBasis, { x, window: { start, end, reach }, room: { place, weight } }: { x: number; window: Window; room: WindowRoom },
): number {
  let total = 0;
  for (let k = 0; k < end - start; k++) {
    place[k] = (at[start + k] - x) / reach;
    weight[k] = weights[start + k] * tricube(place[k]);
    total += weight[k];
  }
  return total;
}

/** A polynomial over the window: its squared norm, and its value and slope at the window's middle. */
type Polynomial = { norm: number; atZero: number; slope: number; centre: number };

/** p1 = u - centre. */
function writeLine({ place, weight, line }: WindowRoom, count: number, total: number): Polynomial | null {
  const mean = weightedSum(weight, place, count) / total;
  for (let k = 0; k < count; k++) line[k] = place[k] - mean;
  const left = weightedSum(weight, line, count) / total;
  const centre = mean + left;
  let norm = 0;
  let rounding = 0;
  for (let k = 0; k < count; k++) {
    line[k] -= left;
    norm += weight[k] * line[k] * line[k];
    rounding += weight[k] * (Math.abs(place[k]) + Math.abs(centre)) ** 2;
  }
  return norm > leastNorm * rounding ? { norm, atZero: -centre, slope: 1, centre } : null;
}

/** p2 = (u - middle) p1 - drop, where middle and drop make it orthogonal to p1 and to constants. */
function writeBend({ place, weight, line, bend }: WindowRoom, of: { count: number; total: number; first: Polynomial }): Polynomial | null {
  const { count, total, first } = of;
  let middle = 0;
  for (let k = 0; k < count; k++) middle += (weight[k] * line[k] * line[k] * place[k]) / first.norm;
  for (let k = 0; k < count; k++) bend[k] = (place[k] - middle) * line[k];
  let atZero = -middle * first.atZero;
  let slope = first.atZero - middle;
  for (let pass = 0; pass < 2; pass++) {
    const drop = weightedSum(weight, bend, count) / total;
    let along = 0;
    for (let k = 0; k < count; k++) along += (weight[k] * bend[k] * line[k]) / first.norm;
    for (let k = 0; k < count; k++) bend[k] -= drop + along * line[k];
    atZero -= drop + along * first.atZero;
    slope -= along;
  }
  let norm = 0;
  let rounding = 0;
  for (let k = 0; k < count; k++) {
    norm += weight[k] * bend[k] * bend[k];
    rounding += weight[k] * ((Math.abs(place[k]) + Math.abs(middle)) * (Math.abs(place[k]) + Math.abs(first.centre))) ** 2;
  }
  return norm > leastNorm * rounding ? { norm, atZero, slope, centre: middle } : null;
}

function weightedSum(weight: Float64Array, values: Float64Array, count: number): number {
  let sum = 0;
  for (let k = 0; k < count; k++) sum += weight[k] * values[k];
  return sum;
}

function tricube(place: number): number {
  const distance = Math.abs(place);
  if (distance >= 1) return 0;
  const rest = 1 - distance * distance * distance;
  return rest * rest * rest;
}
