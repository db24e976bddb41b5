import type { SeenValues } from "../types";
import { distinctValues, mostCells } from "./distinct-values";
import type { DistinctValues } from "./distinct-values";

/**
 * Distinct values of a column, ascending, and how many rows have each. O(n) for few distinct values, else O(n log n).
 *
 * @param values length n. Not changed. known the column's distinct values where they were looked for; null: too many to tell.
 * @example seenNumbers(Float64Array.of(2, 1, 2)); // values 1, 2; counts 1, 2
 */
export function seenNumbers(values: Float64Array, known?: DistinctValues | null): { values: Float64Array; counts: Float64Array } {
  const inserted = known === undefined && values.length <= fewRows ? seenByInsertion(values) : null;
  if (inserted !== null) return inserted;
  const found = known === undefined ? distinctValues(values) : known;
  return found === null ? seenBySorting(values) : { values: found.values, counts: found.counts };
}

/** Up to so many rows, and distinct values among them, a value is soonest put in its place by halving. */
const fewRows = 1_000;
const fewValues = 64;

/** Null where there are more distinct values. */
function seenByInsertion(values: Float64Array): { values: Float64Array; counts: Float64Array } | null {
  const known = new Float64Array(fewValues);
  const counts = new Float64Array(fewValues);
  let used = 0;
  for (let row = 0; row < values.length; row++) {
    const value = values[row];
    let place = 0;
    for (let end = used; place < end;) {
      const middle = (place + end) >> 1;
      if (known[middle] < value) place = middle + 1;
      else end = middle;
    }
    if (place === used || known[place] !== value) {
      if (used === fewValues) return null;
      for (let k = used++; k > place; k--) {
        known[k] = known[k - 1];
        counts[k] = counts[k - 1];
      }
      known[place] = value;
      counts[place] = 0;
    }
    counts[place]++;
  }
  return { values: known.slice(0, used), counts: counts.slice(0, used) };
}

function seenBySorting(values: Float64Array): { values: Float64Array; counts: Float64Array } {
  const sorted = values.slice().sort();
  let distinct = sorted.length === 0 ? 0 : 1;
  for (let at = 1; at < sorted.length; at++) if (sorted[at] !== sorted[at - 1]) distinct++;
  const seen = { values: new Float64Array(distinct), counts: new Float64Array(distinct) };
  let used = -1;
  for (let at = 0; at < sorted.length; at++) {
    if (at === 0 || sorted[at] !== sorted[at - 1]) seen.values[++used] = sorted[at];
    seen.counts[used]++;
  }
  return seen;
}

/**
 * How many rows have each level.
 *
 * @param index per row, the position of its level in `levels`.
 * @example seenLevels(["a", "b"], Int32Array.of(1, 1, 0)); // values a, b; counts 1, 2
 */
export function seenLevels(levels: readonly string[], index: Int32Array): SeenValues {
  const counts = new Float64Array(levels.length);
  let start = 0;
  for (let row = 1; row <= index.length; row++) {
    if (row < index.length && index[row] === index[start]) continue;
    counts[index[start]] += row - start;
    start = row;
  }
  return { values: [...levels], counts };
}

/**
 * Distinct values of a column within each level, and how many rows have each. O(n log n).
 *
 * @param index per row, the position of its level, below `count`.
 * @param found the column's distinct values, where they are known already.
 * @example seenPerLevel(Float64Array.of(2, 1, 2), Int32Array.of(0, 1, 0), 2)[0]; // values 2; counts 2
 */
export function seenPerLevel(
  values: Float64Array, index: Int32Array, count: number, found = distinctValues(values),
): { values: Float64Array; counts: Float64Array }[] {
  if (found !== null && found.values.length * count <= mostCells) return fromTable(found, index, count);
  const lengths = new Int32Array(count);
  for (let row = 0; row < index.length; row++) lengths[index[row]]++;
  const perLevel = Array.from(lengths, (length) => new Float64Array(length));
  const used = new Int32Array(count);
  for (let row = 0; row < index.length; row++) perLevel[index[row]][used[index[row]]++] = values[row];
  return perLevel.map((own) => seenNumbers(own));
}

function fromTable({ values, codes }: DistinctValues, index: Int32Array, count: number): { values: Float64Array; counts: Float64Array }[] {
  const width = values.length;
  const table = new Int32Array(count * width);
  for (let row = 0; row < index.length; row++) table[index[row] * width + codes[row]]++;
  return Array.from({ length: count }, (_, level) => {
    const own = table.subarray(level * width, (level + 1) * width);
    let distinct = 0;
    for (let k = 0; k < width; k++) if (own[k] > 0) distinct++;
    const seen = { values: new Float64Array(distinct), counts: new Float64Array(distinct) };
    let used = 0;
    for (let k = 0; k < width; k++) {
      if (own[k] === 0) continue;
      seen.values[used] = values[k];
      seen.counts[used++] = own[k];
    }
    return seen;
  });
}

/**
 * Distinct pairs of two columns, ascending by the first, then the second, and how many rows have each. O(n log n).
 *
 * @param left length n. Not changed. right likewise.
 * @example seenPairs(Float64Array.of(2, 1), Float64Array.of(3, 4)); // values 1, 2; second 4, 3; counts 1, 1
 */
export function seenPairs(left: Float64Array, right: Float64Array): SeenValues & { values: Float64Array; second: Float64Array } {
  const order = Array.from(left, (_, row) => row).sort((a, b) => left[a] - left[b] || right[a] - right[b]);
  const starts = order.filter((row, k) => k === 0 || left[row] !== left[order[k - 1]] || right[row] !== right[order[k - 1]]);
  const counts = new Float64Array(starts.length);
  let used = -1;
  for (const row of order) {
    if (row === starts[used + 1]) used++;
    counts[used]++;
  }
  return {
    values: Float64Array.from(starts, (row) => left[row]),
    second: Float64Array.from(starts, (row) => right[row]),
    counts,
  };
}
