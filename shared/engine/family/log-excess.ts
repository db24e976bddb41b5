/**
 * ln(1 + x) - x without the cancellation for small x; not positive.
 *
 * @param x above -1 (at or below it the answer is -Infinity).
 * @example logExcess(1e-9); // -5e-19
 */
export function logExcess(x: number): number {
  if (x <= -1) return -Infinity;
  if (Math.abs(x) > 0.02) return Math.log1p(x) - x;
  let sum = 0;
  for (let power = 10; power >= 2; power--) sum = 1 / power - x * sum;
  return -x * x * sum;
}

/**
 * ln(x / mean) - (x / mean - 1), as precise where the two are near and where they are far apart.
 *
 * @param x above 0. mean likewise.
 * @example logRatioExcess(2, 2); // 0
 */
export function logRatioExcess(x: number, mean: number): number {
  const excess = (x - mean) / mean;
  return Math.abs(excess) < 0.5 ? logExcess(excess) : Math.log(x / mean) - excess;
}
