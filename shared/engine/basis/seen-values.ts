import type { SeenValues } from "../types";

/**
 * Distinct values of a column, ascending, and how many rows have each. O(n log n).
 *
 * @param values length n. Not changed.
 * @example seenNumbers(Float64Array.of(2, 1, 2)); // values 1, 2; counts 1, 2
 */
export function seenNumbers(values: Float64Array): { values: Float64Array; counts: Float64Array } {
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
  for (let row = 0; row < index.length; row++) counts[index[row]]++;
  return { values: [...levels], counts };
}
