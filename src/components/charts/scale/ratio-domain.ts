type Banded = { estimate: number; lower: number; upper: number };

/** Below this a curve that does nothing would be blown up into one that seems to do much. */
const smallestSpan = Math.log(1.25);

/**
 * A log domain for multipliers: holds 1, every estimate, and the bands as far as they stay in proportion (a band
 * may take at most as much room again as the curve; what lies beyond is clipped, and the numbers say how wide it is).
 */
export const ratioDomain = (points: readonly Banded[]): [number, number] => {
  const estimates = points.map((point) => Math.log(point.estimate)).filter(Number.isFinite);
  const low = Math.min(0, ...estimates);
  const high = Math.max(0, ...estimates);
  const allowance = Math.max(smallestSpan / 2, (high - low) * 0.5);
  const lower = Math.max(low - allowance, Math.min(low, ...logs(points.map((point) => point.lower))));
  const upper = Math.min(high + allowance, Math.max(high, ...logs(points.map((point) => point.upper))));
  const lacking = Math.max(0, smallestSpan - (upper - lower)) / 2;
  const padding = (upper - lower + 2 * lacking) * 0.06;
  return [Math.exp(lower - lacking - padding), Math.exp(upper + lacking + padding)];
};

const logs = (values: readonly number[]) => values.filter((value) => value > 0 && Number.isFinite(value)).map(Math.log);
