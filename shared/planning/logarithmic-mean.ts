/**
 * The logarithmic mean of two positive numbers, L(a, b) = (a - b) / (ln a - ln b), and a where they are equal: the weight
 * that turns a difference of logarithms into a difference of units (Ang, Energy Policy 33 (2005) 867-871).
 * Between the geometric and the arithmetic mean. Accurate to a few units in the last place for near-equal numbers too.
 *
 * @returns 0 where one of them is 0, its limit.
 * @example logarithmicMean(150, 100) * Math.log(1.5) // 50
 */
export function logarithmicMean(one: number, other: number): number {
  if (one === other) return one;
  if (one === 0 || other === 0) return 0;
  return (one - other) / logarithmOfRatio(one, other);
}

/**
 * The derivatives of the logarithmic mean with respect to the logarithms of its two arguments:
 * (a - L) / (ln a - ln b) and (L - b) / (ln a - ln b); both a / 2 where a = b. They add up to L.
 *
 * @example logarithmicMeanSlopes(100, 100) // { byLogOne: 50, byLogOther: 50 }
 */
export function logarithmicMeanSlopes(one: number, other: number): { byLogOne: number; byLogOther: number } {
  if (one === 0 || other === 0) return { byLogOne: 0, byLogOther: 0 };
  const gap = logarithmOfRatio(one, other);
  const mean = logarithmicMean(one, other);
  if (Math.abs(gap) >= SMALL_GAP) return { byLogOne: (one - mean) / gap, byLogOther: (mean - other) / gap };
  // Both quotients cancel near gap = 0: their series in the gap, times `other`.
  const byLogOne = other * (1 / 2 + gap * (1 / 3 + gap * (1 / 8 + gap * (1 / 30 + gap * (1 / 144 + gap / 840)))));
  return { byLogOne, byLogOther: mean - byLogOne };
}

/** Below this the series is exact to 1e-15 while the quotient has lost up to three digits. */
const SMALL_GAP = 5e-3;

function logarithmOfRatio(one: number, other: number): number {
  // The difference of near-equal numbers is exact, and log1p of their small ratio loses nothing.
  const relative = (one - other) / other;
  return Math.abs(relative) < 0.5 ? Math.log1p(relative) : Math.log(one / other);
}
