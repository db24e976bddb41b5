/** First and last of ascending values. */
export const rangeOf = (ascending: Float64Array): [number, number] => [ascending[0], ascending[ascending.length - 1]];

/**
 * Per row, 1 where the value lies outside the range.
 *
 * @example outsideRange([1, 2], Float64Array.of(0.5, 1.5)); // 1, 0
 */
export function outsideRange(range: [number, number] | null, values: Float64Array): Uint8Array {
  const flags = new Uint8Array(values.length);
  if (range === null) return flags;
  for (let row = 0; row < values.length; row++) flags[row] = values[row] < range[0] || values[row] > range[1] ? 1 : 0;
  return flags;
}
