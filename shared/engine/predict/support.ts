import type { FittedTerm } from "../types";

/** Share of the range's width within which, on either side, a fitted row supports a value. */
const nearness = 0.05;

/**
 * Fitted rows near each value: within a twentieth of the observed range's width on the scale of the basis (on a circle, of
 * its period, wrapping round); at the level itself for a factor. O(distinct values + points x log distinct values).
 *
 * @param x values in the column's own unit, or level names.
 * @example supportCounts(term, Float64Array.of(1.49))[0]; // weeks learnt from near 1.49
 */
export function supportCounts(term: FittedTerm, x: Float64Array | readonly string[]): Float64Array {
  const { basis, seen } = term;
  if (basis.kind === "factor") {
    const countOf = new Map(basis.levels.map((level, k) => [level, seen.counts[k]]));
    return Float64Array.from(Array.from<string | number>(x), (level) => countOf.get(String(level)) ?? 0);
  }
  const isLog = "log" in basis && basis.log;
  const scale = (value: number) => (isLog ? Math.log(value) : value);
  const values = Float64Array.from(numbers(seen.values), scale);
  const cumulative = runningTotals(seen.counts);
  if (basis.kind === "cyclic-smooth") return circleCounts(basis, { values, cumulative }, x);
  const half = nearness * (values[values.length - 1] - values[0]);
  return numbers(x).map((value) => between({ values, cumulative }, scale(value) - half, scale(value) + half));
}

const numbers = (values: Float64Array | readonly string[]): Float64Array => Float64Array.from(Array.from<number | string>(values), Number);

type Ordered = { values: Float64Array; cumulative: Float64Array };

function runningTotals(counts: Float64Array): Float64Array {
  const totals = new Float64Array(counts.length + 1);
  for (let k = 0; k < counts.length; k++) totals[k + 1] = totals[k] + counts[k];
  return totals;
}

/** Number of values in [from, to]; a little rounding either way does not lose an end. */
function between({ values, cumulative }: Ordered, from: number, to: number): number {
  const slack = 1e-12 * Math.max(Math.abs(from), Math.abs(to));
  return cumulative[firstAbove(values, to + slack)] - cumulative[firstAbove(values, from - slack)];
}

function firstAbove(values: Float64Array, limit: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] > limit) high = middle;
    else low = middle + 1;
  }
  return low;
}

function circleCounts(period: { lower: number; upper: number }, seen: Ordered, x: Float64Array | readonly string[]): Float64Array {
  const length = period.upper - period.lower;
  const wrap = (value: number) => value - length * Math.floor((value - period.lower) / length);
  const pairs = Array.from(seen.values, (value, k) => ({ value: wrap(value), count: seen.cumulative[k + 1] - seen.cumulative[k] }));
  pairs.sort((left, right) => left.value - right.value);
  const ordered = {
    values: Float64Array.from(pairs, ({ value }) => value),
    cumulative: runningTotals(Float64Array.from(pairs, ({ count }) => count)),
  };
  const half = nearness * length;
  return numbers(x).map((raw) => {
    const value = wrap(raw);
    return between(ordered, value - half, value + half)
      + between(ordered, value - half + length, value + half + length)
      + between(ordered, value - half - length, value + half - length);
  });
}
