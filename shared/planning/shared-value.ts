/** What several store-weeks have in common: one value, or "mixed" with its extremes (numbers) or its values (words). */
export type SharedValue<T> = { kind: "same"; value: T } | { kind: "mixed"; values: T[] } | { kind: "none" };

/**
 * Whether all store-weeks of a lane hold the same value. What differs is shown as "mixed".
 *
 * @returns "same" with the value; "mixed" with the distinct values in ascending order; "none" for an empty list.
 * @example sharedValue([1.49, 1.49]) // { kind: "same", value: 1.49 }
 */
export function sharedValue<T extends number | string>(values: Iterable<T>): SharedValue<T> {
  const distinct = [...new Set(values)].sort((one, other) => (one < other ? -1 : 1));
  if (distinct.length === 0) return { kind: "none" };
  return distinct.length === 1 ? { kind: "same", value: distinct[0] } : { kind: "mixed", values: distinct };
}
