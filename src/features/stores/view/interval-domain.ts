type Interval = { estimate: number; lower: number; upper: number };

/** One axis for a table's intervals: holds every estimate and the reference, and most of the intervals. */
export const intervalDomain = (intervals: readonly Interval[], reference: number): [number, number] => {
  if (intervals.length === 0) return [reference - 1, reference + 1];
  const estimates = intervals.map(({ estimate }) => estimate);
  const low = Math.min(reference, ...estimates);
  const high = Math.max(reference, ...estimates);
  const room = Math.max((high - low) * 0.35, 0.1);
  return [
    Math.max(low - room, Math.min(low, ...intervals.map(({ lower }) => lower))),
    Math.min(high + room, Math.max(high, ...intervals.map(({ upper }) => upper))),
  ];
};
