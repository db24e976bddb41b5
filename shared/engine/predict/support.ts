import type { FittedTerm } from "../types";

/** Share of the range's width within which, on either side, a fitted row supports a value. */
const nearness = 0.05;

/**
 * Fitted rows near each value: within a twentieth of the observed range's width on the scale of the basis (on a circle, of
 * its period, wrapping round); at the level or group itself for a factor or random effect; for a tensor product
 * see `surfaceSupport`. O(distinct values + points x log distinct values).
 *
 * @param x values in the column's own unit, or names.
 * @param group which of a term's curves: counts that level's or group's rows only.
 * @example supportCounts(term, Float64Array.of(1.49))[0]; // weeks learnt from near 1.49
 */
export function supportCounts(term: FittedTerm, x: Float64Array | readonly string[], group?: string): Float64Array {
  const { basis, seen } = term;
  if (basis.kind === "factor" || basis.kind === "random-effect") {
    const countOf = new Map(basis.levels.map((level, k) => [level, seen.counts[k]]));
    return Float64Array.from(Array.from<string | number>(x), (level) => countOf.get(String(level)) ?? 0);
  }
  const isLog = "log" in basis && basis.log;
  const scale = (value: number) => (isLog ? Math.log(value) : value);
  const all = numbers(seen.values);
  const own = group !== undefined && "levels" in basis ? seen.byLevel?.[basis.levels.indexOf(group)] : undefined;
  const values = Float64Array.from(own?.values ?? all, scale);
  const cumulative = runningTotals((own ?? seen).counts);
  if (basis.kind === "cyclic-smooth") return circleCounts(basis, { values, cumulative }, x);
  const half = nearness * (scale(all[all.length - 1]) - scale(all[0]));
  return numbers(x).map((value) => between({ values, cumulative }, scale(value) - half, scale(value) + half));
}

/**
 * Fitted rows near each point of a grid: within a twentieth of both ranges' widths. O(distinct pairs + points of the grid).
 *
 * @param x ascending. y likewise.
 * @returns row-major, x.length x y.length.
 * @example surfaceSupport(term, { x, y })[0]; // rows near x[0] and y[0]
 */
export function surfaceSupport({ basis, seen }: FittedTerm, { x, y }: { x: Float64Array; y: Float64Array }): Float64Array {
  const counts = new Float64Array(x.length * y.length);
  if (basis.kind !== "tensor-product" || seen.second === undefined) return counts;
  const [half, halfSecond] = basis.ranges.map(([from, to]) => nearness * (to - from));
  const values = numbers(seen.values);
  // Each pair adds its rows at the corners of the points it is near to; running sums spread them.
  const columns = y.length + 1;
  const corners = new Float64Array((x.length + 1) * columns);
  for (let k = 0; k < values.length; k++) {
    const rows = nearPoints(x, values[k], half);
    const cells = nearPoints(y, seen.second[k], halfSecond);
    corners[rows.from * columns + cells.from] += seen.counts[k];
    corners[rows.from * columns + cells.to] -= seen.counts[k];
    corners[rows.to * columns + cells.from] -= seen.counts[k];
    corners[rows.to * columns + cells.to] += seen.counts[k];
  }
  const above = new Float64Array(columns);
  for (let i = 0; i < x.length; i++) {
    let left = 0;
    for (let j = 0; j < y.length; j++) {
      above[j] += corners[i * columns + j];
      left += above[j];
      counts[i * y.length + j] = left;
    }
  }
  return counts;
}

/** First point within half of a value, and the one after the last. */
function nearPoints(points: Float64Array, value: number, half: number): { from: number; to: number } {
  const slack = 1e-12 * (Math.abs(value) + half);
  return { from: firstAbove(points, value - half - slack), to: firstAbove(points, value + half + slack) };
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
