import { countAtMost, countLogDensity, countSize, logTailBound } from "./count-distribution";
import { mostNodes } from "./mixture-nodes";
import type { MixtureNodes } from "./mixture-nodes";

export type End = {
  /** Probability to be reached. */
  wanted: number;
  /** Where the search starts. */
  guess: number;
};

/** With no more counts than these up to the guess of the upper end, all probabilities below it are summed up. */
const mostSummed = 1500;
/** Probabilities that are nothing beside one. */
const negligible = 1e-15;
const logNegligible = Math.log(negligible);
/** A falling mass below this adds nothing any more. */
const runOut = 1e-17;
/** Counts stepped through one by one before the search jumps. */
const mostSteps = 300;
const mostJumps = 200;

/**
 * Smallest whole numbers that reach given probabilities, of a mixture of negative binomials (or Poissons): summed up from
 * where anything is, while counts are small; else from a guess, by Newton's jumps within a bracket and then one by one, as
 * P(k + 1) = P(k) (k + size) / (k + 1) x mean / (mean + size) costs next to nothing beside a distribution function.
 *
 * @param nodes means ascending, ratios of variance to mean, weights.
 * @param ends probabilities wanted, ascending.
 * @returns one count per end: what a search of the distribution function by bisection returns, ties within rounding (1e-10) aside.
 * @example countQuantiles(nodes, [{ wanted: 0.1, guess: 3 }, { wanted: 0.9, guess: 9 }]);
 */
export function countQuantiles(nodes: MixtureNodes, ends: readonly End[]): number[] {
  if (ends.length === 0) return [];
  const own = prepare(nodes);
  const isNear = ends[ends.length - 1].guess - own.beginnings[0] < mostSummed;
  const found = isNear ? sumUpwards(own, ends) : null;
  return found ?? ends.map((end) => search(own, end));
}

type Mixture = MixtureNodes & {
  sizes: Float64Array;
  /** P(k + 1) / P(k) = (slope k + base) / (k + 1). */
  slope: Float64Array;
  base: Float64Array;
  /** Weight times probability of the present count. */
  masses: Float64Array;
  /** Counts at which probabilities begin; one more entry, Infinity, ends them. */
  beginnings: Float64Array;
};

const blank = () => new Float64Array(mostNodes);
/** Filled again for every row, so that rows cost no memory. */
const mixture: Mixture = {
  count: 0, means: blank(), ratios: blank(), weights: blank(), sizes: blank(), slope: blank(), base: blank(), masses: blank(),
  beginnings: new Float64Array(mostNodes + 1),
};

function prepare({ count, means, ratios, weights }: MixtureNodes): Mixture {
  Object.assign(mixture, { count, means, ratios, weights });
  for (let j = 0; j < count; j++) {
    const size = countSize(means[j], ratios[j]);
    mixture.sizes[j] = size;
    mixture.slope[j] = size === Infinity ? 0 : means[j] / (means[j] + size);
    mixture.base[j] = size === Infinity ? means[j] : mixture.slope[j] * size;
  }
  fillBeginnings(mixture);
  return mixture;
}

/** Weight times probability of `count` at a node. */
const massAt = ({ means, sizes, weights }: Mixture, node: number, count: number): number =>
  weights[node] * Math.exp(countLogDensity(count, means[node], sizes[node]));

/** Sets the masses to those of `count`; returns their sum. */
function placeAt(own: Mixture, count: number): number {
  const { means, sizes, masses } = own;
  let sum = 0;
  for (let j = 0; j < own.count; j++) {
    masses[j] = logTailBound(count, means[j], sizes[j]) > logNegligible ? massAt(own, j, count) : 0;
    sum += masses[j];
  }
  return sum;
}

/** Moves the masses of nodes from `first` to `last` (left out) from `count` to the next count; returns their sum. */
function moveUp({ masses, slope, base }: Mixture, count: number, { first, last }: { first: number; last: number }): number {
  const share = 1 / (count + 1);
  let sum = 0;
  for (let j = first; j < last; j++) sum += masses[j] *= (slope[j] * count + base[j]) * share;
  return sum;
}

/** Moves the masses from `count` to the one before; returns their sum. */
function moveDown({ count: nodes, masses, slope, base }: Mixture, count: number): number {
  let sum = 0;
  for (let j = 0; j < nodes; j++) sum += masses[j] *= count / (slope[j] * (count - 1) + base[j]);
  return sum;
}

/**
 * Counts below which a node's share is nothing: below the mean, Chernoff's bound is under exp(-d^2 / 2) at d standard deviations,
 * as the variance grows with the mean. No node begins after the next, so that those begun are always the first ones.
 */
function fillBeginnings({ count, means, ratios, weights, beginnings }: Mixture): void {
  beginnings[count] = Infinity;
  for (let j = count - 1; j >= 0; j--) {
    const deviations = Math.sqrt(2 * Math.log(Math.max(1, weights[j] / negligible)));
    const own = Math.max(0, Math.floor(means[j] - deviations * Math.sqrt(means[j] * Math.max(1, ratios[j]))));
    beginnings[j] = Math.min(own, beginnings[j + 1]);
  }
}

/**
 * Each node joins where its probabilities begin and leaves where they have run out. Null where an end is further up than this way
 * is good for.
 */
function sumUpwards(own: Mixture, ends: readonly End[]): number[] | null {
  const { masses, means, beginnings } = own;
  const begun = { first: 0, last: 0 };
  const found: number[] = [];
  let below = 0;
  for (let count = beginnings[0]; count <= beginnings[0] + 2 * mostSummed; count++) {
    if (begun.last > 0) below += moveUp(own, count - 1, begun);
    while (beginnings[begun.last] <= count) {
      below += masses[begun.last] = massAt(own, begun.last, count);
      begun.last++;
    }
    while (begun.first < begun.last && masses[begun.first] < runOut && count > means[begun.first]) begun.first++;
    while (below >= ends[found.length].wanted) {
      if (found.push(count) === ends.length) return found;
    }
  }
  return null;
}

function atMost({ count: nodes, means, ratios, sizes, weights }: Mixture, count: number): number {
  let sum = 0;
  for (let j = 0; j < nodes; j++) {
    if (logTailBound(count, means[j], sizes[j]) > logNegligible) sum += weights[j] * countAtMost(count, means[j], ratios[j]);
    else if (count > means[j]) sum += weights[j];
  }
  return sum;
}

function search(own: Mixture, { wanted, guess }: End): number {
  let low = -1;
  let high = Number.MAX_SAFE_INTEGER;
  let count = Math.max(0, Math.min(high, Math.round(guess)));
  for (let jump = 0; jump < mostJumps && high - low > 1; jump++) {
    const below = atMost(own, count);
    const mass = placeAt(own, count);
    const step = (wanted - below) / mass;
    const found = Math.abs(step) < mostSteps ? stepwise(own, { count, below, mass, wanted }) : null;
    if (found !== null) return found;
    if (below >= wanted) high = count;
    else low = count;
    // Every third jump halves the bracket, whatever Newton says: a mixture's steps can be flat between its means.
    const next = jump % 3 === 2 ? Number.NaN : Math.round(count + step);
    count = next > low && next < high ? next : middleOf(low, high);
  }
  return high;
}

/** Halfway, or, while the bracket has no upper end, further up. */
const middleOf = (low: number, high: number): number =>
  high === Number.MAX_SAFE_INTEGER ? Math.min(2 * low + 2, high - 1) : Math.floor((low + high) / 2);

/** The answer where it is within reach of single steps, else null. Starts with the masses at `count`, `mass` in all. */
function stepwise(own: Mixture, from: { count: number; below: number; mass: number; wanted: number }): number | null {
  let { count, below, mass } = from;
  const { wanted } = from;
  if (below >= wanted) {
    for (let step = 0; step < 2 * mostSteps; step++) {
      below -= mass;
      if (count === 0 || below < wanted) return count;
      mass = moveDown(own, count);
      count--;
    }
    return null;
  }
  const all = { first: 0, last: own.count };
  for (let step = 0; step < 2 * mostSteps; step++) {
    below += moveUp(own, count, all);
    count++;
    if (below >= wanted) return count;
  }
  return null;
}
